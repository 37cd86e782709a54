import { describe, expect, it } from 'vitest';
import { ruleInput } from '../../../features/rule/rule-input';
import { IDENTITY_TEXT, readMap } from './affine';
import { stationsDone, stationsView, type StationRow } from './stations-view';

const IDENTITY = readMap(IDENTITY_TEXT);

function row(over: Partial<StationRow>): StationRow {
	return {
		id: 'r',
		inequalityId: 'i',
		station: null,
		quantity: 'quantum',
		level: null,
		state: 'done',
		renewal: false,
		checked: true,
		lower: null,
		upper: null,
		exact: null,
		...over
	};
}

// I3322: local 0; quantum 0.2508753 to 0.2508754 (Pál and Vértesi 2010); the first run is cut short.
const LOCAL = row({ station: 'local', quantity: 'local', lower: 0, upper: 0, exact: '0' });
const CUT_SHORT = row({ station: 'quantum', lower: 0.2503, upper: 0.250876 });
const LONGER = row({ lower: 0.2508618, upper: 0.2508756 });

describe('the stations of an inequality', () => {
	it('show the best of all its checked runs', () => {
		const view = stationsView([LOCAL, CUT_SHORT, LONGER], IDENTITY);
		expect(Number(view.quantumLower)).toBeCloseTo(0.2508618, 7);
		expect(Number(view.quantumLower)).toBeLessThanOrEqual(0.2508618);
		expect(Number(view.quantumUpper)).toBeCloseTo(0.2508756, 7);
		expect(Number(view.quantumUpper)).toBeGreaterThanOrEqual(0.2508756);
		expect(view.complete).toBe(true);
		const level3 = row({ quantity: 'npa', level: 3, upper: 0.25087 + 2e-6 });
		expect(stationsView([CUT_SHORT, level3], IDENTITY).quantumUpper).toMatch(/^0\.250872/);
	});

	it('take nothing from a run that no check accepted', () => {
		const view = stationsView([LOCAL, CUT_SHORT, { ...LONGER, checked: null }], IDENTITY);
		expect(Number(view.quantumLower)).toBeCloseTo(0.2503, 6);
	});

	it('know the almost-quantum level by either name', () => {
		const run = row({ quantity: 'npa', level: { perParty: 1 }, upper: 0.5 });
		expect(stationsView([run], IDENTITY).almostQuantum).toBe('0.5');
	});

	it('are done whatever else a claim asked for', () => {
		expect(stationsDone([LOCAL, { ...LONGER, state: 'running' }])).toBe(true);
		expect(stationsDone([{ ...LOCAL, state: 'running' }])).toBe(false);
		// What it proved stands while a newer solver does it over.
		expect(stationsDone([{ ...LOCAL, state: 'running', renewal: true }])).toBe(true);
		expect(stationsView([LONGER], IDENTITY).complete).toBe(false);
	});

	it('stand as fractions where these are short and decimals are not', () => {
		// Guess your neighbour's input, three parties: no-signalling 1/3 (Almeida et al. 2010).
		const noSignalling = row({
			quantity: 'no-signalling',
			lower: 1 / 3,
			upper: 1 / 3,
			exact: '1/3'
		});
		const local = row({ quantity: 'local', lower: 0.25, upper: 0.25, exact: '1/4' });
		const view = stationsView([local, noSignalling], IDENTITY);
		expect(view).toMatchObject({ local: '0.25', noSignalling: '1/3' });
		expect(ruleInput({ stations: view }).noSignalling).toBeCloseTo(1 / 3, 15);
		const long = row({ quantity: 'local', exact: '1/1023' });
		expect(stationsView([long], IDENTITY).local).toBe('0.000977517');
	});
});
