import { describe, expect, test } from 'vitest';
import { npaProblem } from '../../../../tests/factories/npa-problem';
import type { ProblemConstraint, ProblemOf } from '../problem';
import { functionalOfTerms } from '../scenario/problem-terms';
import { functionalToMaximise } from '../scenario/problem-functional';
import { checkExactMoments } from './check-exact-moments';
import type { ExactMomentCertificate } from './types';

/** P(0|0) of the first party, whose maximum is 1. */
const f = functionalOfTerms([[2], [2]], [['1', [[0, 0, 0]]]]);
const problem = npaProblem(f, 1);

/** By hand: (1 - E)^2 >= 0 says 1 - 2 E + E = 1 - E >= 0. A singular matrix. */
const byHand: ExactMomentCertificate = {
	kind: 'npa-exact',
	monomials: [
		[[], []],
		[[[0, 0]], []]
	],
	denominator: 1,
	multiplier: [1, -1, 1],
	rowMultipliers: {},
	constraintMultipliers: [],
	shift: 0,
	bound: '1',
	moments: null,
	feasibleValue: null
};

const check = (changed: object, about: ProblemOf<'npa'> = problem) =>
	checkExactMoments(about, functionalToMaximise(about), { ...byHand, ...changed });

describe('an exact multiplier', () => {
	test('written by hand proves the maximum itself', () => {
		expect(check({})).toMatchObject({
			checked: true,
			upper: 1,
			lower: null,
			exactBound: '1',
			method: expect.stringMatching(/in whole numbers \(elimination\)$/)
		});
	});

	test('over another denominator, as texts, with a shift, or with something left over', () => {
		const tenfold = { denominator: '10', multiplier: ['10', -10, '10'] };
		expect(check(tenfold)).toMatchObject({ checked: true, exactBound: '1' });
		// 2 rows, shift 3 of 10: 6/10 more.
		const shifted = { ...tenfold, multiplier: [10, -10, 7], shift: 3, bound: '2' };
		expect(check(shifted)).toMatchObject({ checked: true, exactBound: '19/10' });
		// 1 - 2 E + 2 E = 1: E itself is left over, which is at most 1.
		const rest = { multiplier: [1, -1, 2], bound: '2' };
		expect(check(rest)).toMatchObject({ checked: true, exactBound: '2' });
	});

	test('of a minimum bounds -f', () => {
		const least = { ...problem, sense: 'min' } as const;
		expect(check({ multiplier: [0, 0, 1], bound: '0' }, least)).toMatchObject({ upper: 0 });
	});

	test('uses constraints with their signs', () => {
		const under = (relation: ProblemConstraint['relation']) => ({
			...problem,
			constraints: [{ terms: problem.terms, relation, value: '1/3' }]
		});
		const multiplier = { multiplier: [0, 0, 0], constraintMultipliers: [1], bound: '1/3' };
		expect(check(multiplier, under('<='))).toMatchObject({ checked: true, exactBound: '1/3' });
		const negative = { ...multiplier, constraintMultipliers: [-1] };
		expect(check(negative, under('='))).toMatchObject({ checked: true, exactBound: '1/3' });
		expect(check(negative, under('<='))).toMatchObject({ checked: false });
		expect(check(multiplier, under('>='))).toMatchObject({ checked: false });
	});

	test('uses rows where they are imposed', () => {
		const imposed = { ...problem, nonNegative: true };
		// E + P(1|0) = 1
		const rows = { multiplier: [0, 0, 0], rowMultipliers: { '1,-|0,-': 1 } };
		expect(check(rows, imposed)).toMatchObject({ checked: true, exactBound: '1' });
		expect(check(rows)).toMatchObject({ checked: false });
	});
});

describe('is refused', () => {
	test.each<[object, RegExp]>([
		[{ bound: '99/100' }, /^the certificate proves 1, not the printed bound$/],
		[{ bound: 1 }, /the bound is no fraction/],
		[{ bound: 'one' }, /the bound is no fraction/],
		[{ multiplier: [1, -2, 3], bound: '9' }, /not proved positive semidefinite/],
		[{ multiplier: [-1, -1, 1], bound: '9' }, /not proved positive semidefinite/],
		[{ multiplier: [1, -1] }, /wrong size/],
		[{ multiplier: [1, -1, 1, 0] }, /wrong size/],
		[{ multiplier: [1, -1.5, 2] }, /-1\.5 is no whole number/],
		[{ multiplier: [1, '-1.5', 2] }, /no whole number/],
		[{ multiplier: [1, null, 2] }, /no whole number/],
		[{ multiplier: [2 ** 53, -1, 1] }, /no whole number below 2\^53/],
		[{ multiplier: ['9'.repeat(201), -1, 1] }, /no whole number/],
		[{ denominator: 0 }, /denominator is not positive/],
		[{ denominator: -1 }, /denominator is not positive/],
		[{ shift: -1 }, /shift is negative/],
		[{ shift: 1 }, /proves 3/],
		[{ constraintMultipliers: [1] }, /no constraint/],
		[{ rowMultipliers: { '0|0': 1 } }, /not imposed/],
		[{ monomials: byHand.monomials.slice(0, 1), multiplier: [1] }, /lack a moment/],
		[
			{
				monomials: [
					[[], []],
					[[[0, 0, 7]], []]
				]
			},
			/not a word/
		],
		[{ monomials: null }, /malformed/],
		[{ rowMultipliers: null }, /malformed/],
		[{ moments: [1] }, /come together/],
		[{ moments: [1], feasibleValue: 1 }, /every monomial/]
	])('%j', (changed, reason) => {
		expect(check(changed)).toEqual({ checked: false, reason: expect.stringMatching(reason) });
	});

	test('for irrational coefficients', () => {
		const irrational = npaProblem(functionalOfTerms([[2], [2]], [['sqrt(2)', [[0, 0, 0]]]]), 1);
		expect(check({ bound: '9' }, irrational)).toMatchObject({
			reason: 'an exact certificate needs rational coefficients'
		});
	});

	test('past its size', () => {
		const inputs = 400;
		const wide = functionalOfTerms([new Array<number>(inputs).fill(2), [2]], [['1', [[0, 0, 0]]]]);
		const monomials = Array.from({ length: inputs + 1 }, (_, i) =>
			i === 0 ? [[], []] : [[[i - 1, 0]], []]
		);
		const multiplier = new Array<number>(((inputs + 1) * (inputs + 2)) / 2).fill(0);
		expect(check({ monomials, multiplier }, npaProblem(wide, 1))).toMatchObject({
			reason: '401 monomials: an exact check takes at most 400'
		});
	});
});
