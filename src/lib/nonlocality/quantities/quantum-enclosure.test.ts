import { describe, expect, it } from 'vitest';
import type { Control, ProblemOf } from '../problem';
import { QuantumEnclosure } from './quantum-enclosure';
import { quantumMaximum } from './quantum-maximum';
import { familyFunctional } from '../scenario/families';
import { termsOfFunctional } from '../scenario/problem-terms';
import { checkEnclosure } from '../certificates/check-enclosure';
import type { EnclosureCertificate } from '../certificates/types';

const control: Control = {
	now: () => performance.now(),
	shouldStop: () => false,
	report: () => {}
};
const g = familyFunctional({ name: 'chsh' });
const problem: ProblemOf<'quantum'> = {
	format: 1,
	quantity: 'quantum',
	outputs: g.scenario.outputs,
	terms: termsOfFunctional(g),
	sense: 'max',
	constraints: [],
	seconds: 10,
	seed: 1,
	levels: null,
	dimensions: null,
	gap: 1e-8
};
const solved = quantumMaximum(problem, g, control);
const TSIRELSON = 2 * Math.SQRT2; // Cirel'son, Lett. Math. Phys. 4, 93 (1980)

function certificate(): EnclosureCertificate & Record<string, unknown> {
	return JSON.parse(JSON.stringify(solved.certificate));
}

/** Every number below `node`, as the object that holds it and its key. */
function places(node: unknown): [object, string, number][] {
	if (typeof node !== 'object' || node === null) return [];
	return Object.entries(node).flatMap(([key, child]) =>
		typeof child === 'number' ? [[node, key, child] as [object, string, number]] : places(child)
	);
}

describe('checkEnclosure', () => {
	it('proves both sides that were printed', () => {
		const outcome = checkEnclosure(problem, g, certificate());
		expect(outcome).toMatchObject({ checked: true });
		if (!outcome.checked) return;
		expect(outcome.lower).toBeGreaterThanOrEqual(solved.lower ?? Infinity);
		expect(outcome.upper).toBeLessThanOrEqual(solved.upper ?? -Infinity);
	});

	it('never excludes the quantum maximum, whatever number is changed', () => {
		let caught = 0;
		let accepted = 0;
		for (const change of [1e-7, -1e-3, 0.5, NaN]) {
			const count = places(certificate()).length;
			for (let at = 0; at < count; at++) {
				const mutant = certificate();
				const [holder, key, value] = places(mutant)[at] ?? [{}, '', 0];
				Reflect.set(holder, key, value + change);
				const outcome = checkEnclosure(problem, g, mutant);
				if (!outcome.checked) {
					caught++;
					continue;
				}
				accepted++;
				expect(outcome.lower).toBeLessThanOrEqual(TSIRELSON);
				expect(outcome.upper).toBeGreaterThanOrEqual(TSIRELSON);
			}
		}
		expect(caught).toBeGreaterThan(accepted);
	});

	it('takes one side alone, and refuses none and the wrong kinds', () => {
		const { lower, upper } = certificate();
		const one = checkEnclosure(problem, g, { ...certificate(), upper: null, upperLevel: null });
		expect(one).toMatchObject({ checked: true, upper: null });
		const other = checkEnclosure(problem, g, { ...certificate(), lower: null });
		expect(other).toMatchObject({ checked: true, lower: null });
		const none = { ...certificate(), lower: null, upper: null };
		expect(checkEnclosure(problem, g, none)).toMatchObject({ checked: false });
		const swapped = JSON.parse(JSON.stringify({ ...certificate(), lower: upper, upper: lower }));
		expect(checkEnclosure(problem, g, swapped)).toMatchObject({ checked: false });
		for (const upperLevel of [0, 'x', null, { perParty: 0 }, { products: [1] }])
			expect(checkEnclosure(problem, g, { ...certificate(), upperLevel })).toMatchObject({
				reason: 'upper side: its level cannot be read'
			});
	});
});

describe('QuantumEnclosure', () => {
	const lower = certificate().lower;
	const upper = certificate().upper;

	it('has infinite sides before anything is known', () => {
		const enclosure = new QuantumEnclosure();
		expect([enclosure.floor, enclosure.ceiling, enclosure.width]).toEqual([
			-Infinity,
			Infinity,
			Infinity
		]);
		expect(enclosure.lowerFrom).toBeNull();
	});

	it('keeps the better sides, and takes crossing ones for a defect', () => {
		if (!lower || !upper) throw new Error('both sides were found');
		const enclosure = new QuantumEnclosure();
		expect(enclosure.raise(2, lower)).toBe(true);
		expect(enclosure.raise(1, lower)).toBe(false);
		expect(enclosure.reduce(3, upper, 1)).toBe(true);
		expect(enclosure.reduce(4, upper, 2)).toBe(false);
		expect(enclosure.upperLevel).toBe(1);
		expect(enclosure.width).toBe(1);
		expect(() => enclosure.raise(3.5, lower)).toThrow(/contradict each other/);
	});
});
