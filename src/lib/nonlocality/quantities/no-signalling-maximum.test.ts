import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import { lehmer, problemOn, quietControl } from '../../../../tests/factories/solver-problem';
import { checkLinearProgramme } from '../certificates/check-linear-programme';
import { parseCoefficient } from '../exact/expression';
import { parseRational } from '../exact/rational';
import type { Problem } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { integerFunctional } from '../scenario/fixed-point';
import {
	collinsGisinForm,
	makeFunctional,
	scaleFunctional,
	type Functional
} from '../scenario/functional';
import { functionalOfTerms } from '../scenario/problem-terms';
import { relabelFunctional } from '../scenario/relabelling';
import { bestBehaviour, bestMultipliers } from './no-signalling-certificate';
import { noSignallingMaximum } from './no-signalling-maximum';
import { maximiseOverPolytope, objectiveOf } from './no-signalling-programme';
import { noSignallingRows } from './no-signalling-rows';
import { solve } from './solve';
import { WorkClock } from './work-clock';

async function maximumOf(f: Functional, constraints: Problem['constraints'] = []) {
	const problem = problemOn('no-signalling', f, { constraints });
	const outcome = await noSignallingMaximum(problem, f, quietControl);
	if (outcome.certificate?.kind !== 'linear-programme') throw new Error('no certificate');
	const check = checkLinearProgramme(problem, f, outcome.certificate);
	if (!check.checked) throw new Error(check.reason);
	expect(check.exact).toBe(outcome.exact);
	return outcome;
}

describe('noSignallingMaximum', () => {
	it.each<[FamilySpec, string]>([
		// Barrett, Kent, Pironio, Phys. Rev. Lett. 97, 170409 (2006): 2n; from memory
		[{ name: 'chained', n: 3 }, '6'],
		[{ name: 'chained', n: 5 }, '10'],
		// Collins et al., Phys. Rev. Lett. 88, 040404 (2002): the algebraic maximum 4
		[{ name: 'cglmp', d: 4 }, '4'],
		[{ name: 'cglmp', d: 5 }, '4'],
		// Almeida et al., Phys. Rev. Lett. 104, 230404 (2010): 1/3, 1/6 (n=4), 1/11 (n=5); from memory
		[{ name: 'gyni', n: 4 }, '1/6'],
		[{ name: 'gyni', n: 5 }, '1/11'],
		// all correlators can be +-1: the sum of their weights
		[{ name: 'elegant' }, '12'],
		[{ name: 'mermin', n: 3 }, '4'],
		[{ name: 'svetlichny', n: 4 }, '16'],
		[{ name: 'magic-square' }, '1']
	])('%o: %s', async (spec, value) => {
		expect((await maximumOf(familyFunctional(spec))).exact).toBe(value);
	});

	it('is exact, invariant under relabelling and at least the local maximum', async () => {
		const scenarios = [
			[
				[2, 2],
				[2, 2]
			],
			[
				[3, 2, 2],
				[2, 3]
			],
			[
				[2, 2],
				[2, 2],
				[2, 2]
			]
		];
		await fc.assert(
			fc.asyncProperty(fc.nat(), fc.constantFrom(...scenarios), async (seed, outputs) => {
				const random = lehmer(seed);
				const f = randomFunctional(outputs, 9, random);
				const { exact } = await maximumOf(f);
				const other = await maximumOf(relabelFunctional(f, randomRelabelling(f, random)));
				expect(other.exact).toBe(exact);
				const local = await solve(problemOn('local', f), quietControl);
				const bound = local.status === 'done' ? parseRational(local.exact ?? '') : null;
				expect(bound && parseRational(exact ?? '')?.compare(bound)).toBeGreaterThanOrEqual(0);
			}),
			{ numRuns: 40, seed: 3 }
		);
	});

	it('solves the basis exactly when the coefficients are long', async () => {
		const f = scaleFunctional(
			familyFunctional({ name: 'gyni', n: 3 }),
			parseCoefficient('123456789012345678901234567890/7')
		);
		const outcome = await maximumOf(f);
		expect(outcome.exact).toBe('5878894714873603757201646090');
		const random = lehmer(8);
		const outputs = [
			[3, 2],
			[2, 3]
		];
		const long = makeFunctional({ outputs }, [
			...randomFunctional(outputs, 9, random).terms.map(({ events }) => ({
				events,
				coefficient: parseCoefficient(`${random(1e9)}${random(1e9)}/${random(1e6) + 1}`)
			}))
		]);
		const { exact, method } = await maximumOf(long);
		expect(exact).toMatch(/^\d{20,}\/\d{20,}$/);
		expect(method).toMatchObject({ multipliers: 'exact basis' });
	});

	it('encloses the maximum for irrational coefficients', async () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const { exact, lower, upper } = await maximumOf(scaleFunctional(chsh, parseCoefficient('pi')));
		expect(exact).toBeNull();
		expect(lower).toBeLessThan(4 * Math.PI);
		expect(upper).toBeGreaterThan(4 * Math.PI);
		expect((upper ?? 0) - (lower ?? 0)).toBeLessThan(1e-11);
	});

	it('gives a constant its own value', async () => {
		expect((await maximumOf(functionalOfTerms([[2], [2]], [['5/3', []]]))).exact).toBe('5/3');
	});

	it('turns signs for the minimum', async () => {
		const f = familyFunctional({ name: 'i3322' });
		const result = await solve(problemOn('no-signalling', f, { sense: 'min' }), quietControl);
		const negative = await maximumOf(scaleFunctional(f, parseCoefficient('-1')));
		expect(result).toMatchObject({ status: 'done', exact: `-${negative.exact}` });
	});

	it('refuses a polytope past its limits, with the figure', async () => {
		const outputs = [Array<number>(40).fill(2), Array<number>(40).fill(2), [2, 2]];
		const result = await solve(
			problemOn('no-signalling', functionalOfTerms(outputs, [['1', [[0, 0, 0]]]])),
			quietControl
		);
		expect(result).toMatchObject({
			status: 'limit',
			reason: expect.stringContaining('25600 inequalities, more than the limit of 20000')
		});
	});
});

describe('under linear constraints', () => {
	const box = [
		[2, 2],
		[2, 2]
	];
	const zero = (x: number, y: number, a: number, b: number) =>
		({
			terms: [
				[
					'1',
					[
						[0, x, a],
						[1, y, b]
					]
				]
			],
			relation: '=',
			value: '0'
		}) as const;

	it("Hardy's paradox reaches 1/2", async () => {
		// Largest P(00|00) under Hardy's three conditions: 1/2 with no-signalling alone (Cereceda,
		// Found. Phys. Lett. 13, 427 (2000); from memory).
		const f = functionalOfTerms(box, [
			[
				'1',
				[
					[0, 0, 0],
					[1, 0, 0]
				]
			]
		]);
		const constraints = [zero(0, 1, 0, 1), zero(1, 0, 1, 0), zero(1, 1, 0, 0)];
		expect((await maximumOf(f, constraints)).exact).toBe('1/2');
	});

	it('a bound on one functional limits another, exactly', async () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const { terms } = problemOn('local', chsh);
		for (const [relation, value, expected] of [
			['<=', '5/2', '5/2'],
			['=', '-7/3', '-7/3'],
			['>=', '3', '4']
		] as const)
			expect((await maximumOf(chsh, [{ terms, relation, value }])).exact).toBe(expected);
	});

	it('says when no behaviour meets them', async () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const { terms } = problemOn('local', chsh);
		const constraints = [{ terms, relation: '>=', value: '5' }] as const;
		const result = await solve(problemOn('no-signalling', chsh, { constraints }), quietControl);
		expect(result).toMatchObject({ status: 'infeasible' });
	});

	it('the check refuses a behaviour or a multiplier that does not fit them', async () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const { terms } = problemOn('local', chsh);
		const constraints = [{ terms, relation: '<=', value: '3' }] as const;
		const problem = problemOn('no-signalling', chsh, { constraints });
		const free = await noSignallingMaximum(problemOn('no-signalling', chsh), chsh, quietControl);
		if (free.certificate?.kind !== 'linear-programme') throw new Error('no certificate');
		expect(checkLinearProgramme(problem, chsh, free.certificate)).toMatchObject({
			checked: false,
			reason: 'primal: constraint 0 is violated'
		});
		const { certificate } = await noSignallingMaximum(problem, chsh, quietControl);
		if (certificate?.kind !== 'linear-programme') throw new Error('no certificate');
		const dual = { 'constraint 0 >=': '1' };
		expect(checkLinearProgramme(problem, chsh, { ...certificate, dual })).toMatchObject({
			checked: false
		});
	});
});

describe('a poor proposal of the simplex method', () => {
	const polytope = noSignallingRows({
		outputs: [
			[2, 2],
			[2, 2]
		]
	});
	const objective = { costs: polytope.columns.map((_, i) => BigInt(i % 3) - 1n), constant: 2n };
	const proposal = {
		status: 'optimal',
		primal: Float64Array.from(polytope.columns, (_, i) => 0.3 + 0.61803398875 * (i % 2)),
		multipliers: Float64Array.from(polytope.rows, (_, i) => 0.1 * Math.PI * (i % 4)),
		activeRows: [0],
		fixedColumns: [],
		iterations: 0
	} as const;

	it('still gives a no-signalling behaviour and a bound, with the gap they leave', () => {
		const behaviour = bestBehaviour(polytope, objective, proposal, () => {});
		expect(behaviour.how).toBe('near the vertex');
		expect(behaviour.probabilities.every((p) => p.compare(0) >= 0)).toBe(true);
		const bound = bestMultipliers(polytope, objective, proposal, 1, () => {});
		expect(bound.how).toBe('rounded, with a residual');
		expect(bound.multipliers.every((m) => m.compare(0) >= 0)).toBe(true);
		expect(bound.bound.compare(behaviour.value)).toBeGreaterThan(0);
	});

	it('is mended by its basis where only its numbers are off', async () => {
		const chsh = familyFunctional({ name: 'chsh' });
		const { terms } = integerFunctional(collinsGisinForm(chsh));
		const costs = objectiveOf(polytope, terms);
		const clock = new WorkClock(quietControl, 3600);
		const { solution } = await maximiseOverPolytope(polytope, costs, clock, quietControl);
		const off = (values: Float64Array) => values.map((value) => value + 1e-5 * Math.PI);
		const outside = solution.primal.map(() => 2);
		for (const primal of [off(solution.primal), outside]) {
			const behaviour = bestBehaviour(polytope, costs, { ...solution, primal }, () => {});
			expect(behaviour.how).toBe('exact basis');
			// the PR box: Popescu, Rohrlich, Found. Phys. 24, 379 (1994)
			expect(behaviour.value.equals(4)).toBe(true);
		}
		const multipliers = off(solution.multipliers);
		const bound = bestMultipliers(polytope, costs, { ...solution, multipliers }, 1, () => {});
		expect(bound.how).toBe('exact basis');
		expect(bound.bound.equals(4)).toBe(true);
	});
});
