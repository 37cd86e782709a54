import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeStations } from '../../../../tests/factories/views';
import { layOutRule } from '../../ledger/rule';
import Rule from './Rule.svelte';
import { ruleInput, stationLabels } from './rule-input';

// I3322 in probabilities: local 0 and no-signalling 1 (Collins, Gisin 2004), almost quantum
// 0.2514709, quantum between 0.250852 and 0.250940 for this drawing.
const i3322 = makeStations({
	local: '0',
	quantumLower: '0.250852',
	quantumUpper: '0.250940',
	almostQuantum: '0.251471',
	noSignalling: '1'
});
const claimed = { low: '0.25145', high: '0.25155' };

describe('Rule', () => {
	it('says in words what it draws', () => {
		const { getByRole } = render(Rule, { stations: i3322, claimed, printed: '0.2515' });
		const text = getByRole('img').getAttribute('aria-label') ?? '';
		for (const part of ['local 0', 'quantum 0.250852', 'no-signalling 1', 'Claimed 0.2515'])
			expect(text).toContain(part);
	});

	it('joins a discrepancy to the nearest admissible value', () => {
		const { container } = render(Rule, {
			stations: i3322,
			claimed,
			printed: '0.2515',
			status: 'discrepancy',
			large: true
		});
		expect(container.querySelector('[stroke-dasharray]')).not.toBeNull();
		expect(container.textContent).toContain('claimed 0.2515');
	});

	it('draws no such line in agreement', () => {
		const { container } = render(Rule, {
			stations: makeStations(),
			claimed: { low: '2.82835', high: '2.82845' },
			printed: '2.8284',
			status: 'agreement',
			large: true
		});
		expect(container.querySelector('[stroke-dasharray]')).toBeNull();
	});

	it('gives stations of one value one label, with the digits both sides share', () => {
		const { container } = render(Rule, { stations: makeStations(), large: true });
		const texts = [...container.querySelectorAll('text')].map((node) => node.textContent);
		expect(texts).toContain('quantum, almost quantum');
		expect(texts).toContain('2.82842712');
	});

	it('shows an exact value as the fraction it is', () => {
		// No-signalling 1/3 as of guess your neighbour's input (Almeida et al. 2010); the rest is made up.
		const stations = makeStations({
			local: '-1/6',
			quantumLower: '0.25',
			quantumUpper: '0.25',
			almostQuantum: '0.25',
			noSignalling: '1/3'
		});
		const labels = stationLabels(layOutRule(ruleInput({ stations })), stations);
		expect(labels.map(({ figures }) => figures)).toEqual(['\u22121/6', '0.25', '1/3']);
		expect(labels.at(-1)?.at).toBeGreaterThan(0.9);
	});

	it('never lays the label of one place on that of another', () => {
		// A quantum block whose lower side is the local value: its long figures need a row of their own.
		const wide = makeStations({
			local: '0.250000001',
			quantumLower: '0.250000001',
			quantumUpper: '0.25000124',
			almostQuantum: '0.2501',
			noSignalling: '0.333333334'
		});
		const layout = layOutRule(ruleInput({ stations: wide }));
		const labels = stationLabels(layout, wide);
		expect(labels.map(({ label }) => label)).toEqual([
			'local',
			'quantum',
			'almost quantum',
			'no-signalling'
		]);
		expect(labels[1]?.row).toBe(1);
		expect(labels[2]?.row).toBe(0);
		expect(
			stationLabels(layOutRule(ruleInput({ stations: i3322 })), i3322).map((l) => l.row)
		).toEqual([0, 0, 0, 0]);
	});

	it('stands without any value', () => {
		const nothing = makeStations({
			local: null,
			quantumLower: null,
			quantumUpper: null,
			almostQuantum: null,
			noSignalling: null
		});
		const { getByRole } = render(Rule, { stations: nothing });
		expect(getByRole('img').getAttribute('aria-label')).toContain('No value is known yet');
	});
});
