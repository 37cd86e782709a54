import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PLACES, layOutRule, type RuleInput } from './rule';

const I3322: RuleInput = {
	local: 0,
	quantumLower: 0.25085221,
	quantumUpper: 0.25093973,
	almostQuantum: 0.25147091,
	noSignalling: 1,
	claimed: { low: 0.25145, high: 0.25155, printed: '0.2515' },
	status: 'discrepancy'
};

const at = (input: RuleInput, value: number) =>
	layOutRule({ ...input, claimed: { low: value, high: value, printed: String(value) } }).claim;

describe('layOutRule', () => {
	it('puts the stations at their fixed places, in order', () => {
		const { stations } = layOutRule(I3322);
		expect(stations.map(({ key, from, to }) => [key, from, to])).toEqual([
			['local', 0, PLACES.local],
			['quantum', PLACES.quantumLower, PLACES.quantumUpper],
			['almost-quantum', PLACES.almostQuantum, PLACES.almostQuantum],
			['no-signalling', PLACES.noSignalling, PLACES.noSignalling]
		]);
		expect(stations.map((s) => s.figures)).toEqual(['0', '0.250852 … 0.250940', '0.251471', '1']);
	});

	it('places the claim linearly between two stations', () => {
		const halfway = at(I3322, (I3322.almostQuantum ?? 0) / 2 + 0.5);
		expect(halfway?.x).toBeCloseTo((PLACES.almostQuantum + PLACES.noSignalling) / 2, 9);
		expect(at(I3322, 0.125426105)?.x).toBeCloseTo((PLACES.local + PLACES.quantumLower) / 2, 9);
	});

	it('joins a discrepancy to the nearest admissible value, and nothing else', () => {
		const layout = layOutRule(I3322);
		expect(layout.dashed).toEqual({ from: layout.claim?.x, to: PLACES.quantumUpper });
		expect(layOutRule({ ...I3322, status: 'agreement' }).dashed).toBeNull();
		const local = layOutRule({ ...I3322, admissible: { lower: 0, upper: 0 } });
		expect(local.dashed?.to).toBe(PLACES.local);
	});

	it('draws a claim beyond the ends at the end, and marks it', () => {
		expect(at(I3322, 7)).toEqual({ x: 1, beyond: 'right', printed: '7' });
		expect(at(I3322, -7)).toEqual({ x: 0, beyond: 'left', printed: '-7' });
		expect(at(I3322, -0.1)?.beyond).toBeNull();
	});

	it('lets coinciding stations share a place', () => {
		// Mermin, three parties: local 2, quantum and no-signalling 4.
		const mermin = layOutRule({
			...I3322,
			local: 2,
			quantumLower: 3.9999999999,
			quantumUpper: 4.0000000001,
			almostQuantum: 4.00000002,
			noSignalling: 4,
			claimed: null
		});
		const places = mermin.stations.map((s) => s.to);
		expect(places).toEqual([0.3, 0.54, 0.54, 0.54]);
		expect(mermin.stations.map((s) => s.coincides)).toEqual([false, false, true, true]);
	});

	it('skips what is not known', () => {
		const little = layOutRule({
			...I3322,
			quantumLower: null,
			quantumUpper: null,
			almostQuantum: null
		});
		expect(little.stations.map((s) => s.key)).toEqual(['local', 'no-signalling']);
		expect(little.dashed).toBeNull();
		const nothing = layOutRule({
			local: null,
			quantumLower: null,
			quantumUpper: null,
			almostQuantum: null,
			noSignalling: null,
			claimed: { low: 1, high: 1, printed: '1' },
			status: 'open'
		});
		expect(nothing).toMatchObject({ stations: [], claim: { x: 0.5, beyond: null }, dashed: null });
		expect(nothing.text).toBe('No value is known yet. Claimed 1.');
	});

	it('says in words what it draws', () => {
		expect(layOutRule(I3322).text).toBe(
			'In order: local 0, quantum 0.250852 … 0.250940, almost quantum 0.251471, no-signalling 1. Claimed 0.2515, above the nearest admissible value 0.250940.'
		);
	});

	it('runs the same way for a minimum', () => {
		const mirrored = layOutRule({
			local: 0,
			quantumLower: -0.25093973,
			quantumUpper: -0.25085221,
			almostQuantum: -0.25147091,
			noSignalling: -1,
			claimed: { low: -0.25155, high: -0.25145, printed: '-0.2515' },
			status: 'discrepancy'
		});
		const layout = layOutRule(I3322);
		expect(mirrored.stations.map((s) => [s.from, s.to])).toEqual(
			layout.stations.map((s) => [s.from, s.to])
		);
		expect(mirrored.claim?.x).toBeCloseTo(layout.claim?.x ?? -1, 9);
		expect(mirrored.dashed?.to).toBe(layout.dashed?.to);
	});

	it('keeps order and stays on the line, for any values', () => {
		const value = fc.option(fc.double({ min: -10, max: 10, noNaN: true }), { nil: null });
		const claim = fc.double({ min: -20, max: 20, noNaN: true });
		fc.assert(
			fc.property(fc.tuple(value, value, value, value, value), claim, claim, (v, a, b) => {
				const known = v.filter((x) => x !== null).sort((x, y) => x - y);
				const next = (present: number | null) =>
					present === null ? null : (known.shift() ?? null);
				const input: RuleInput = {
					local: next(v[0]),
					quantumLower: next(v[1]),
					quantumUpper: next(v[2]),
					almostQuantum: next(v[3]),
					noSignalling: next(v[4]),
					claimed: null,
					status: null
				};
				const [low, high] = [at(input, Math.min(a, b)), at(input, Math.max(a, b))];
				expect(low?.x).toBeLessThanOrEqual(high?.x ?? -1);
				for (const x of [low?.x ?? -1, high?.x ?? -1]) {
					expect(x).toBeGreaterThanOrEqual(0);
					expect(x).toBeLessThanOrEqual(1);
				}
				const places = layOutRule(input).stations.map((s) => s.to);
				expect(places).toEqual([...places].sort((x, y) => x - y));
			})
		);
	});
});
