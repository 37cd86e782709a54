import { describe, expect, it } from 'vitest';
import type { CheckOutcome } from '../nonlocality/certificates/types';
import { ONE, ZERO, parseRational, type Rational } from '../nonlocality/exact/rational';
import type { DoneResult, Level, Problem } from '../nonlocality/problem';
import { IDENTITY_MAP, evidenceOfFinding, othersOfFindings, type Finding } from './evidence';
import { methodMatches } from './method';
import { isWithin, sameQuantity } from './nesting';
import { valueLabel } from './problem-labels';

const r = (text: string): Rational => parseRational(text) ?? expect.fail(`${text} is no rational`);
const SAME = { scale: ONE, shift: ZERO };

const SUBJECT = {
	format: 1,
	outputs: [
		[2, 2],
		[2, 2]
	],
	terms: [],
	sense: 'max',
	constraints: [],
	seconds: 10,
	seed: 0
} as const;

const local: Problem = { ...SUBJECT, quantity: 'local' };
const noSignalling: Problem = { ...SUBJECT, quantity: 'no-signalling' };
const quantum: Problem = {
	...SUBJECT,
	quantity: 'quantum',
	levels: null,
	dimensions: null,
	gap: 1e-8
};
const npa = (level: Level, nonNegative = false): Problem => ({
	...SUBJECT,
	quantity: 'npa',
	level,
	nonNegative
});
const seeSaw = (
	d: number,
	state: 'free' | 'maximally-entangled' = 'free'
): Extract<Problem, { quantity: 'see-saw' }> => ({
	...SUBJECT,
	quantity: 'see-saw',
	dimension: [d, d],
	starts: 5,
	state
});

function finding(
	problem: Problem,
	lower: number | null,
	upper: number | null,
	more: { exact?: string; checked?: boolean; optimum?: number } = {}
): Finding {
	const result: DoneResult = {
		format: 1,
		quantity: problem.quantity,
		status: 'done',
		problem,
		lower,
		upper,
		value: null,
		tolerance: null,
		optimum: more.optimum ?? null,
		guaranteed: { lower: lower !== null, upper: upper !== null },
		exact: more.exact ?? null,
		certificate: null,
		method: {},
		seconds: 0.1,
		seed: 0,
		solver: 'merestone 0.1.0'
	};
	const check: CheckOutcome =
		more.checked === false
			? { checked: false, reason: 'tampered' }
			: { checked: true, lower, upper, exact: more.exact ?? null, method: '' };
	return { result, check };
}

const sides = (f: Finding, claimed: Problem) =>
	evidenceOfFinding(f, claimed, SAME).map((e) => [
		e.worth,
		e.lower?.valueOf() ?? null,
		e.upper?.valueOf() ?? null
	]);

describe('evidenceOfFinding', () => {
	it('takes from each recomputation the sides that hold for the claimed quantity', () => {
		const bound = finding(npa(1), 2.5, 3);
		expect(sides(bound, quantum)).toEqual([['guaranteed', null, 3]]);
		expect(sides(bound, npa(1))).toEqual([['guaranteed', 2.5, 3]]);
		expect(sides(bound, npa(2))).toEqual([['guaranteed', null, 3]]);
		expect(sides(bound, noSignalling)).toEqual([]);
		expect(sides(finding(seeSaw(2), 2.5, null), quantum)).toEqual([['guaranteed', 2.5, null]]);
		expect(sides(finding(seeSaw(2), 2.5, null), seeSaw(3))).toEqual([['guaranteed', 2.5, null]]);
		expect(sides(finding(seeSaw(3), 2.5, null), seeSaw(2))).toEqual([]);
		expect(sides(finding(local, 2, 2, { exact: '2' }), quantum)).toEqual([['guaranteed', 2, null]]);
		expect(sides(finding(noSignalling, 4, 4, { exact: '4' }), quantum)).toEqual([
			['guaranteed', null, 4]
		]);
		expect(sides(finding(quantum, 2.5, 3), local)).toEqual([['guaranteed', null, 3]]);
	});

	it('turns the sides round for a minimum', () => {
		const minimum = { ...npa(1), sense: 'min' } as const;
		expect(sides(finding(minimum, -3, -2.5), { ...quantum, sense: 'min' })).toEqual([
			['guaranteed', -3, null]
		]);
		expect(sides(finding(minimum, -3, -2.5), quantum)).toEqual([]);
	});

	it('says nothing once the check has refused the certificate', () => {
		expect(sides(finding(npa(1), 2.5, 3, { checked: false }), npa(1))).toEqual([]);
	});

	it('calls unguaranteed sides and values with a tolerance numerical', () => {
		const { result } = finding(quantum, 2.5, 3);
		const unproved = {
			result: { ...result, guaranteed: { lower: false, upper: false } },
			check: null
		};
		expect(sides(unproved, quantum)).toEqual([['numerical', 2.5, 3]]);
		const value = {
			result: { ...result, lower: null, upper: null, value: 2.75, tolerance: 0.25 },
			check: null
		};
		expect(sides(value, quantum)).toEqual([['numerical', 2.5, 3]]);
	});

	it("keeps exact values exact and maps them into the claim's normalisation", () => {
		const map = { scale: r('4'), shift: r('2') };
		const [e] = evidenceOfFinding(finding(local, 0.3, 0.4, { exact: '1/3' }), local, map);
		expect([e?.lower?.toFraction(), e?.upper?.toFraction()]).toEqual(['10/3', '10/3']);
	});

	it('lets an enumeration too large for the check to repeat still prove the local maximum', () => {
		const { result } = finding(local, 2, 2, { exact: '2' });
		const check: CheckOutcome = { checked: true, lower: 2, upper: null, exact: null, method: '' };
		expect(sides({ result, check }, local)).toEqual([['guaranteed', 2, 2]]);
	});

	it('keeps apart problems with other constraints', () => {
		const constrained: Problem = {
			...quantum,
			constraints: [{ terms: [], relation: '=', value: '0' }]
		};
		expect(sides(finding(npa(1), 2.5, 3), constrained)).toEqual([]);
	});
});

describe('othersOfFindings', () => {
	it("labels the other quantities and puts them in the claim's normalisation", () => {
		const findings = [
			finding(quantum, 0.25, 0.251),
			finding(npa('1+AB'), 0.25147089, 0.25147091),
			finding(npa(1, true), 0.36602539, 0.3660254),
			finding(seeSaw(2), 0.25, null)
		];
		const others = othersOfFindings(
			findings,
			quantum,
			{ scale: r('4'), shift: r('4') },
			'NPA level 1+AB'
		);
		expect(others.map((o) => [o.label, o.matchesMethod])).toEqual([
			['the almost-quantum bound (NPA level 1+AB)', true],
			['the macroscopic-locality bound (NPA level 1 with non-negative probabilities)', false],
			['the quantum maximum in local dimension 2 (best value found)', false]
		]);
		expect(others[0]?.fields).toEqual({ level: '1+AB', nonNegative: false });
		expect(others.map((o) => Number(o.lower?.valueOf()).toFixed(3))).toEqual([
			'5.006',
			'5.464',
			'5.000'
		]);
		expect(others.every((o) => o.upper !== null)).toBe(true);
	});

	// As in Hardy's paradox, where the optimum at 1+AB comes out 4e-6 too high.
	it('offers no relaxation that is known from above only', () => {
		const findings = [finding(npa(2), null, 0.0901736, { optimum: 0.0901735 })];
		expect(othersOfFindings(findings, npa(1), IDENTITY_MAP, '')).toEqual([]);
	});
});

describe('isWithin', () => {
	const chain = [
		local,
		seeSaw(2, 'maximally-entangled'),
		seeSaw(2),
		seeSaw(3),
		quantum,
		npa(3),
		npa(2),
		npa('1+AB'),
		npa(1, true),
		npa(1)
	];

	it('orders the sets from local to level 1', () => {
		chain.forEach((inner, i) => {
			chain.forEach((outer, j) => {
				expect([i, j, isWithin(inner, outer)]).toEqual([i, j, i <= j]);
			});
		});
	});

	it('has quantum within no-signalling, but not level 1, which exceeds it for CGLMP d=3', () => {
		expect(isWithin(quantum, noSignalling)).toBe(true);
		expect(isWithin(npa(1), noSignalling)).toBe(false);
		expect(isWithin(noSignalling, quantum)).toBe(false);
	});

	it('counts the dimension that a see-saw grows to', () => {
		const grown = { ...seeSaw(2), grow: 8 };
		expect(sameQuantity(grown, seeSaw(8))).toBe(true);
		expect(isWithin(seeSaw(3), grown)).toBe(true);
		expect(isWithin(grown, seeSaw(3))).toBe(false);
		expect(valueLabel(grown)).toContain('in local dimension 8');
	});

	it('has the hybrid models between local and no-signalling, apart from quantum', () => {
		const hybrid = (model: 'svetlichny' | 'no-signalling'): Problem => ({
			...local,
			quantity: 'hybrid',
			model
		});
		const [wide, narrow] = [hybrid('svetlichny'), hybrid('no-signalling')];
		for (const [inner, outer] of [
			[local, narrow],
			[local, wide],
			[narrow, wide],
			[narrow, noSignalling]
		] as const) {
			expect(isWithin(inner, outer)).toBe(true);
			expect(isWithin(outer, inner)).toBe(false);
		}
		// signalling groups: the writing of a functional may exceed its no-signalling maximum
		expect(isWithin(wide, noSignalling)).toBe(false);
		for (const set of [wide, narrow]) {
			expect(isWithin(quantum, set)).toBe(false);
			expect(isWithin(set, quantum)).toBe(false);
			expect(sameQuantity(set, { ...set })).toBe(true);
		}
		expect(sameQuantity(wide, narrow)).toBe(false);
		const facet: Problem = { ...local, quantity: 'facet' };
		expect(isWithin(local, facet) || isWithin(facet, noSignalling)).toBe(false);
	});

	it('takes 1+AB and one operator per party for the same, positivity being implied', () => {
		expect(sameQuantity(npa('1+AB'), npa({ perParty: 1 }, true))).toBe(false);
		expect(sameQuantity(npa('1+AB'), npa('1+AB', true))).toBe(true);
		expect(sameQuantity(npa(1), npa(1, true))).toBe(false);
	});
});

describe('methodMatches', () => {
	it.each<[string, Problem, boolean]>([
		['NPA level 2', npa(2), true],
		['second paper uses level 3 of the hierarchy', npa(3), true],
		['NPA level 2', npa(3), false],
		['NPA level 1', npa(1), true],
		['NPA level 1', npa(1, true), false],
		['level 1 with non-negative probabilities', npa(1, true), true],
		['NPA level 1+AB', npa('1+AB'), true],
		['NPA level 1 + AB', npa(1), false],
		['almost quantum set', npa('1+AB'), true],
		['see-saw over qubits', seeSaw(2), true],
		['enumeration of vertices', local, true],
		['linear programming over no-signalling boxes', noSignalling, true],
		['', npa(2), false],
		['analytic', local, false]
	])('%j', (method, problem, matches) => {
		expect(methodMatches(method, problem)).toBe(matches);
	});
});
