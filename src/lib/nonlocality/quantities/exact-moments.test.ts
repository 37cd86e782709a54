import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { floatingCertificate } from '../../../../tests/factories/floating-certificate';
import { PATIENT, npaProblem } from '../../../../tests/factories/npa-problem';
import { randomFunctional } from '../../../../tests/factories/random-functional';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { checkExactMoments } from '../certificates/check-exact-moments';
import { parseRational, toDoubleUp } from '../exact/rational';
import type { Level, ProblemConstraint, ProblemOf } from '../problem';
import type { FamilySpec } from '../scenario/families';
import { functionalOfTerms } from '../scenario/problem-terms';
import { functionalToMaximise } from '../scenario/problem-functional';
import { exactMomentBound } from './exact-moments';
import { makeMomentProblem } from './moment-problem';
import { npaBound } from './npa-bound';

function solve(problem: ProblemOf<'npa'>) {
	const g = functionalToMaximise(problem);
	return { g, ...npaBound(problem, g, PATIENT) };
}

function exactly(problem: ProblemOf<'npa'>) {
	const { g, lower, upper, certificate } = solve(problem);
	if (certificate?.kind !== 'npa-exact' || upper === null) throw new Error('not exact');
	const check = checkExactMoments(problem, g, certificate);
	if (!check.checked) throw new Error(check.reason);
	return { lower, upper, certificate, check };
}

/** What a guaranteed bound of up to 90 monomials may leave open. */
const GAP = 3e-9;

const constraint = (
	coefficient: string,
	relation: ProblemConstraint['relation'],
	value: string
): ProblemConstraint => ({ terms: [[coefficient, [[0, 0, 0]]]], relation, value });

describe('an exact bound', () => {
	const chsh: FamilySpec = { name: 'chsh' };
	const cases: [FamilySpec, Level, Partial<ProblemOf<'npa'>>][] = [
		[chsh, 1, {}],
		[chsh, '1+AB', { sense: 'min' }],
		[{ name: 'i3322' }, 1, {}],
		[{ name: 'i3322' }, 2, {}],
		[{ name: 'cglmp', d: 3 }, '1+AB', {}],
		[{ name: 'cglmp', d: 3 }, 1, { nonNegative: true }],
		[{ name: 'cglmp', d: 4 }, '1+AB', { sense: 'min' }],
		[{ name: 'mermin', n: 3 }, 2, {}],
		[{ name: 'gyni', n: 3 }, { perParty: 1 }, {}],
		[{ name: 'magic-square' }, 1, {}],
		[{ name: 'tilted-chsh', alpha: '1/3' }, '1+AB', {}],
		[{ name: 'tilted-chsh', alpha: '0.123456789012345678901234567' }, '1+AB', {}],
		[chsh, '1+AB', { constraints: [constraint('1/3', '<=', '0.05')] }],
		[chsh, '1+AB', { constraints: [constraint('1', '>=', '6/7')], sense: 'min' }]
	];
	test.each(cases)('%o at %o %o', (family, level, overrides) => {
		const { lower, upper, certificate, check } = exactly(npaProblem(family, level, overrides));
		// Every residual is 0: the check finds the printed fraction, not a smaller one.
		expect(check.exactBound).toBe(certificate.bound);
		expect(toDoubleUp(parseRational(certificate.bound) ?? fail())).toBe(upper);
		expect(upper - (lower ?? NaN)).toBeLessThan(GAP);
		for (const entry of certificate.multiplier)
			expect(Number.isSafeInteger(entry)).toBe(Number.isSafeInteger(Number(entry)));
	});

	test('under an equality', () => {
		const problem = npaProblem(chsh, '1+AB', { constraints: [constraint('1/3', '=', '1/7')] });
		const { upper, check } = exactly(problem);
		expect(check.upper).toBe(upper);
		// P(0|0) = 3/7: below the quantum maximum, above the local one.
		expect(upper).toBeGreaterThan(2);
		expect(upper).toBeLessThan(2 * Math.SQRT2);
	});

	test('of random functionals is no worse than the same multipliers in doubles', () => {
		const random = lehmer(7);
		for (const outputs of [
			[
				[2, 2, 2],
				[2, 2]
			],
			[
				[3, 2],
				[2, 3]
			],
			[[2, 2], [2], [2, 2]]
		]) {
			const { upper, certificate } = exactly(npaProblem(randomFunctional(outputs, 9, random), 2));
			expect(upper).toBeLessThanOrEqual(floatingCertificate(certificate).bound);
		}
	});

	const fail = (): never => {
		throw new Error('no fraction');
	};
});

describe('a bound in doubles is kept', () => {
	test.each<[string, FamilySpec, Partial<ProblemOf<'npa'>>]>([
		['for irrational coefficients', { name: 'tilted-chsh', alpha: 'sqrt(2)' }, {}],
		[
			'for an irrational constraint',
			{ name: 'chsh' },
			{ constraints: [constraint('1', '<=', 'sqrt(2)/8')] }
		],
		['for huge denominators', { name: 'tilted-chsh', alpha: `0.${'123456789'.repeat(9)}` }, {}]
	])('%s', (_, family, overrides) => {
		const { certificate } = solve(npaProblem(family, '1+AB', overrides));
		expect(certificate?.kind).toBe('npa-dual');
	});
});

describe('degenerate functionals', () => {
	const scenario = {
		outputs: [
			[2, 2],
			[2, 2]
		]
	};
	test.each([
		['constant', [['7/3', []]], 7 / 3],
		['zero', [], 0],
		[
			'small and large together',
			[
				['1e12', [[0, 0, 0]]],
				['1e-12', [[1, 0, 0]]]
			],
			1e12
		]
	] as const)('%s', (_, terms, truth) => {
		const f = functionalOfTerms(scenario, terms);
		const problem = npaProblem(f, 1);
		const { g, upper, certificate } = solve(problem);
		expect(upper).toBeGreaterThanOrEqual(truth);
		expect((upper ?? NaN) - truth).toBeLessThan(1e-9 * Math.max(1, truth));
		if (certificate?.kind === 'npa-exact')
			expect(checkExactMoments(problem, g, certificate)).toMatchObject({ checked: true });
	});
});

test('whatever the multipliers, the certificate made of them is checked', () => {
	const problem = npaProblem({ name: 'cglmp', d: 3 }, 1, {
		nonNegative: true,
		constraints: [constraint('1/3', '<=', '1/6'), constraint('1', '=', '2/5')]
	});
	const g = functionalToMaximise(problem);
	const relaxation = makeMomentProblem(problem, g);
	const n = relaxation.programme.size;
	const { certificate } = npaBound(problem, g, PATIENT);
	if (certificate?.kind !== 'npa-exact') throw new Error('not exact');
	const floating = floatingCertificate(certificate);
	const noise = fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 5 });
	let made = 0;
	fc.assert(
		fc.property(noise, fc.constantFrom(1e-14, 1e-9, 1e-6), (numbers, size) => {
			const draw = (i: number) => size * (numbers[i % numbers.length] ?? 0);
			const matrix = new Float64Array(n * n);
			for (let i = 0; i < n; i++) {
				for (let j = 0; j <= i; j++) {
					const cell = (i * (i + 1)) / 2 + j;
					matrix[i * n + j] = (floating.multiplier[cell] ?? 0) + draw(cell);
					matrix[j * n + i] = matrix[i * n + j] ?? 0;
				}
			}
			const [inequality = 0, equality = 0] = floating.constraintMultipliers ?? [];
			const weights = [...Object.values(floating.rowMultipliers), inequality];
			const rows = Float64Array.from(weights, (weight, j) => weight + draw(j));
			const equalities = Float64Array.of(equality + draw(3));
			const bound = exactMomentBound(
				problem,
				g,
				relaxation,
				{ matrix, rows, equalities },
				{ ...floating, bound: 1e9, moments: null, feasibleValue: null }
			);
			if (!bound) return;
			made++;
			expect(checkExactMoments(problem, g, bound.certificate)).toMatchObject({
				checked: true,
				exactBound: bound.certificate.bound
			});
		}),
		{ numRuns: 60 }
	);
	expect(made).toBeGreaterThan(10);
});
