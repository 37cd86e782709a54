import { describe, expect, it } from 'vitest';
import { randomFunctional } from '../../../../tests/factories/random-functional';
import { lehmer, problemOn, quietControl } from '../../../../tests/factories/solver-problem';
import { verifyResult } from '../certificates/verify';
import { parseCoefficient } from '../exact/expression';
import { parseRational } from '../exact/rational';
import type { DoneResult, Problem, ProblemConstraint, Result } from '../problem';
import { parseExpression } from '../scenario/expression';
import { familyFunctional } from '../scenario/families';
import { scaleFunctional, type Functional } from '../scenario/functional';
import { termsOfFunctional } from '../scenario/problem-terms';
import { solve } from './solve';

const TWO = [
	[2, 2],
	[2, 2]
];

const read = (expression: string, outputs = TWO) =>
	parseExpression(expression, { outputs, indexBase: 0 }).functional;

const constraint = (
	form: string | Functional,
	relation: ProblemConstraint['relation'],
	value: string
): ProblemConstraint => ({
	terms: termsOfFunctional(typeof form === 'string' ? read(form) : form),
	relation,
	value
});

async function solved(problem: Problem): Promise<DoneResult> {
	const result: Result = await solve(problem, quietControl);
	if (result.status !== 'done') throw new Error(`${result.status}: ${result.reason}`);
	expect(verifyResult(result)).toMatchObject({ checked: true, exact: result.exact });
	return result;
}

async function maximumOf(f: Functional, constraints: ProblemConstraint[], sense?: 'min') {
	const problem = problemOn('local', f, { constraints, ...(sense && { sense }) });
	return (await solved(problem)).exact;
}

/** The eight CHSH inequalities: with non-negativity all facets (Fine, PRL 48, 291 (1982)). */
const FACETS = Array.from({ length: 8 }, (_, s) => {
	const minus = s & 3;
	const sign = (k: number) => ((k === minus) !== s >= 4 ? '-' : '+');
	const form = `${sign(0)} A0 B0 ${sign(1)} A0 B1 ${sign(2)} A1 B0 ${sign(3)} A1 B1`;
	return constraint(form, '<=', '2');
});

describe('constrainedLocalMaximum', () => {
	it("leaves nothing of Hardy's paradox", async () => {
		// Hardy, Phys. Rev. Lett. 71, 1665 (1993): P(00|00) > 0 is impossible locally
		const constraints = ['P(0,1|0,1)', 'P(1,0|1,0)', 'P(0,0|1,1)'].map((form) =>
			constraint(form, '=', '0')
		);
		expect(await maximumOf(read('P(0,0|0,0)'), constraints)).toBe('0');
	});

	it.each<[string, ProblemConstraint[], string]>([
		// a joint probability is at most each of its marginals
		['P(0,0|0,0)', [constraint('P_A(0|0)', '=', '1/3')], '1/3'],
		[
			'P(0,0|0,0)',
			[constraint('P_A(0|0)', '<=', '1/3'), constraint('P_B(0|0)', '<=', '1/4')],
			'1/4'
		],
		// a constraint that does not bind
		['A0 B0 + A0 B1 + A1 B0 - A1 B1', [constraint('A0 B0', '<=', '1')], '2'],
		// CHSH <= 2: with three correlators at least 1/2 the fourth is at least -1/2
		['- A1 B1', ['A0 B0', 'A0 B1', 'A1 B0'].map((form) => constraint(form, '>=', '1/2')), '1/2'],
		// three correlators of 3/4 and CHSH = 2 leave one value, 1/4
		[
			'A1 B1',
			[
				...['A0 B0', 'A0 B1', 'A1 B0'].map((form) => constraint(form, '=', '3/4')),
				constraint('A0 B0 + A0 B1 + A1 B0 - A1 B1', '=', '2')
			],
			'1/4'
		],
		// the values of a functional that is fixed
		['3 A0 B0 - 1', [constraint('A0 B0', '=', '-2/7')], '-13/7']
	])('%s', async (expression, constraints, value) => {
		expect(await maximumOf(read(expression), constraints)).toBe(value);
	});

	it('agrees with the no-signalling programme cut by all facets', async () => {
		for (let seed = 0; seed < 25; seed++) {
			const random = lehmer(seed);
			const f = randomFunctional(TWO, 9, random);
			const extra = Array.from({ length: 1 + (seed % 3) }, (_, k) => {
				const relation = (['<=', '>=', '='] as const)[(seed + k) % 3] ?? '=';
				return constraint(randomFunctional(TWO, 3, random), relation, String(random(5) - 2));
			});
			const problem = problemOn('no-signalling', f, { constraints: [...FACETS, ...extra] });
			const expected = await solve(problem, quietControl);
			const found = await solve(problemOn('local', f, { constraints: extra }), quietControl);
			expect(found.status).toBe(expected.status);
			if (found.status !== 'done' || expected.status !== 'done') continue;
			expect(found.exact).toBe(expected.exact);
			expect(verifyResult(found)).toMatchObject({ checked: true, exact: found.exact });
		}
	});

	it('lists only the strategies it needs in a larger scenario', async () => {
		const outputs = [Array<number>(9).fill(2), Array<number>(9).fill(2)];
		const random = lehmer(7);
		const f = randomFunctional(outputs, 9, random);
		const free = await solved(problemOn('local', f));
		const limit = String((free.value ?? 0) / 2);
		// a bound on the functional itself is its maximum
		const constraints = [
			constraint(f, '<=', limit),
			constraint(randomFunctional(outputs, 3, random), '>=', '0'),
			constraint(randomFunctional(outputs, 3, random), '=', '1/3')
		];
		const result = await solved(problemOn('local', f, { constraints }));
		expect(parseRational(result.exact ?? '')?.equals(limit)).toBe(true);
		expect(Number(result.method.strategies)).toBeLessThan(100);
	});

	it('three parties, minima, and large or irrational coefficients', async () => {
		const three = [
			[2, 2],
			[2, 2],
			[2, 2]
		];
		const mermin = familyFunctional({ name: 'mermin', n: 3 });
		// A0 B0 C0 = -1 is the product of A0 B1 C1, A1 B0 C1 and A1 B1 C0: all three may be -1, and
		// then M = -1 + 3
		const fixed = [constraint(read('A0 B0 C0', three), '=', '-1')];
		expect(await maximumOf(mermin, fixed)).toBe('2');
		expect(await maximumOf(read('A1 B1'), [constraint('A0 B0', '=', '1/5')], 'min')).toBe('-1');
		const large = scaleFunctional(read('A0 B0'), parseCoefficient('100000000000000000000001/7'));
		expect(await maximumOf(large, [constraint('A0 B0', '<=', '1/3')])).toBe(
			'100000000000000000000001/21'
		);
		const root = scaleFunctional(read('A0 B0 + A1 B0'), parseCoefficient('sqrt(2)'));
		const result = await solved(
			problemOn('local', root, { constraints: [constraint('A0 B0', '<=', '0')] })
		);
		expect(result.exact).toBeNull();
		// sqrt 2 = 1.41421356237309504880...
		expect(result.lower).toBeLessThan(1.4142135623730951);
		expect(result.upper).toBeGreaterThan(1.414213562373095);
		expect((result.upper ?? 2) - (result.lower ?? 0)).toBeLessThan(1e-12);
	});

	it('says exactly when no local behaviour meets the constraints', async () => {
		const chsh = 'A0 B0 + A0 B1 + A1 B0 - A1 B1';
		for (const [relation, value] of [
			['>=', '2.000001'],
			['=', '5/2'],
			['<=', '-2.1']
		] as const) {
			const problem = problemOn('local', read('A0'), {
				constraints: [constraint(chsh, relation, value)]
			});
			expect(await solve(problem, quietControl)).toMatchObject({
				status: 'infeasible',
				reason: 'no local behaviour meets the constraints'
			});
		}
		expect(await maximumOf(read('A0'), [constraint(chsh, '>=', '2')])).toBe('1');
	});

	it('refuses irrational constraints, and keeps to its budget', async () => {
		const irrational = problemOn('local', read('A0'), {
			constraints: [constraint('A0 B0', '<=', 'sqrt(2)/2')]
		});
		expect(await solve(irrational, quietControl)).toMatchObject({
			status: 'failed',
			reason: expect.stringContaining('constraint 0 needs rational coefficients')
		});
		const outputs = [Array<number>(22).fill(2), Array<number>(22).fill(2)];
		const wide = randomFunctional(outputs, 3, lehmer(1));
		const late = problemOn('local', wide, {
			constraints: [constraint(randomFunctional(outputs, 3, lehmer(2)), '=', '0')],
			seconds: 0.2
		});
		expect(await solve(late, quietControl)).toMatchObject({ status: 'limit' });
		expect(
			await solve({ ...late, seconds: 60 }, { ...quietControl, shouldStop: () => true })
		).toMatchObject({ status: 'cancelled' });
	});
});
