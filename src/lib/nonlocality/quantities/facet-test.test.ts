import { describe, expect, it } from 'vitest';
import {
	lehmer,
	problemOn,
	quietControl,
	solved
} from '../../../../tests/factories/solver-problem';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import { verifyResult } from '../certificates/verify';
import { parseCoefficient } from '../exact/expression';
import { ONE, ZERO, parseRational, type Rational } from '../exact/rational';
import type { DoneResult, Problem } from '../problem';
import { parseExpression } from '../scenario/expression';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { scaleFunctional, type Functional } from '../scenario/functional';
import { relabelFunctional } from '../scenario/relabelling';
import { functionalOfTerms } from '../scenario/problem-terms';
import { solve } from './solve';

function facetProblem(f: Functional): Problem {
	return { ...problemOn('local', f), quantity: 'facet' };
}

async function tested(f: Functional): Promise<DoneResult> {
	const result = await solved(facetProblem(f));
	expect(verifyResult(result)).toMatchObject({ checked: true, exact: result.exact });
	return result;
}

type Strategy = number[][];

/** All deterministic strategies of all parties. */
function allStrategies({ scenario }: Functional): Strategy[] {
	return scenario.outputs.reduce<Strategy[]>(
		(found, counts) => {
			const own = counts.reduce<number[][]>(
				(rows, n) => rows.flatMap((row) => Array.from({ length: n }, (_, a) => [...row, a])),
				[[]]
			);
			return found.flatMap((parties) => own.map((row) => [...parties, row]));
		},
		[[]]
	);
}

/**
 * A second method: every strategy is evaluated term by term, every saturating one written as its
 * whole table of joint probabilities, and their rank found by elimination in fractions.
 */
function plainRank(f: Functional): { rank: number; saturating: number } {
	const strategies = allStrategies(f);
	const values = strategies.map((s) =>
		f.terms.reduce(
			(sum, { coefficient, events }) =>
				events.every(([p, x, a]) => s[p]?.[x] === a) ? sum.add(coefficient.exact ?? ZERO) : sum,
			ZERO
		)
	);
	const most = values.reduce((a, b) => (a.compare(b) > 0 ? a : b));
	const best = strategies.filter((_, i) => values[i]?.equals(most));
	const rows = best.map((s) =>
		f.scenario.outputs.reduce<number[]>(
			(row, counts, p) => {
				const own = counts.flatMap((n, x) =>
					Array.from({ length: n }, (_, a) => (s[p]?.[x] === a ? 1 : 0))
				);
				return row.flatMap((entry) => own.map((other) => entry * other));
			},
			[1]
		)
	);
	return { rank: rankInFractions(rows), saturating: best.length };
}

function rankInFractions(rows: readonly number[][]): number {
	const basis: { pivot: number; row: Rational[] }[] = [];
	for (const numbers of rows) {
		const row = numbers.map((x) => (x === 0 ? ZERO : ONE));
		for (const { pivot, row: other } of basis) {
			const factor = row[pivot] ?? ZERO;
			if (factor.n === 0n) continue;
			other.forEach((x, k) => {
				if (x.n !== 0n) row[k] = (row[k] ?? ZERO).sub(x.mul(factor));
			});
		}
		const pivot = row.findIndex((x) => x.n !== 0n);
		const scale = row[pivot];
		if (scale) basis.push({ pivot, row: row.map((x) => x.div(scale)) });
	}
	return basis.length;
}

describe('facetTest', () => {
	it.each<[FamilySpec, boolean, number, string]>([
		// Fine, Phys. Rev. Lett. 48, 291 (1982): CHSH and positivity are all facets of its scenario
		[{ name: 'chsh' }, true, 8, 'facet'],
		// Collins, Gisin, J. Phys. A 37, 1775 (2004)
		[{ name: 'i3322' }, true, 15, 'facet'],
		// Masanes, Quantum Inf. Comput. 3, 345 (2003): CGLMP is a facet for every d
		[{ name: 'cglmp', d: 3 }, true, 24, 'facet'],
		[{ name: 'cglmp', d: 4 }, true, 48, 'facet'],
		[{ name: 'cglmp', d: 5 }, true, 80, 'facet'],
		// Almeida et al., Phys. Rev. Lett. 104, 230404 (2010): a facet for three parties; from memory
		[{ name: 'gyni', n: 3 }, true, 26, 'facet'],
		// Werner, Wolf, Phys. Rev. A 64, 032112 (2001): Mermin's is a facet of the correlators; that the
		// same holds for all behaviours is computed here, by two methods
		[{ name: 'mermin', n: 3 }, true, 26, 'facet'],
		// Not published as far as known: computed here, by two methods
		[{ name: 'tilted-chsh', alpha: '1/2' }, false, 8, 'no facet'],
		[{ name: 'elegant' }, false, 19, 'no facet'],
		[{ name: 'chained', n: 3 }, false, 15, 'no facet'],
		[{ name: 'svetlichny', n: 3 }, false, 26, 'no facet']
	])('%o: %s, %i dimensions (%s)', async (spec, facet, dimension) => {
		const f = familyFunctional(spec);
		const result = await tested(f);
		expect(result).toMatchObject({ value: facet ? 1 : 0, method: { dimension, facet } });
		if (dimension > 30) return;
		const { rank, saturating } = plainRank(f);
		// A facet's search stops at the dimension, which the rank can't exceed.
		expect(result.method).toMatchObject({ rank, saturating: String(saturating) });
		expect(rank === dimension).toBe(facet);
	});

	it('a lifted facet stays one: more inputs, outputs, parties', async () => {
		// Pironio, J. Math. Phys. 46, 062112 (2005)
		const chsh = familyFunctional({ name: 'chsh' });
		const liftings = [
			[
				[2, 2, 2],
				[2, 2]
			],
			[
				[2, 2],
				[2, 2, 3]
			],
			[[2, 2], [2, 2], [2]]
		];
		for (const outputs of liftings) {
			const f = parseExpression('A0 B0 + A0 B1 + A1 B0 - A1 B1', { outputs, indexBase: 0 });
			const conditional =
				outputs.length === 3
					? // the third party's outcome as a condition: CHSH - 2 times P(0 of party 2)
						'A0 B0 C0 + A0 B1 C0 + A1 B0 C0 - A1 B1 C0 + A0 B0 + A0 B1 + A1 B0 - A1 B1 - 2 C0'
					: null;
			const lifted = conditional
				? parseExpression(conditional, { outputs, indexBase: 0 }).functional
				: f.functional;
			expect((await tested(lifted)).value).toBe(1);
		}
		// one output split in two: outcomes 1 and 2 of input 0 count as one
		const { terms } = problemOn('local', chsh);
		const split = terms.flatMap(([coefficient, events]) => {
			const last = events.find(([p, x, a]) => p === 0 && x === 0 && a === 1);
			const other = events.map((e) => (e === last ? ([0, 0, 2] as const) : e));
			return last
				? [[coefficient, events] as const, [coefficient, other] as const]
				: [[coefficient, events] as const];
		});
		const f = functionalOfTerms(
			[
				[3, 2],
				[2, 2]
			],
			split
		);
		expect((await tested(f)).value).toBe(1);
	});

	it('positivity is a facet, the sum of two positivities is none', async () => {
		const outputs = [
			[2, 2],
			[2, 2]
		];
		const one = parseExpression('-P(0,0|0,0)', { outputs, indexBase: 0 }).functional;
		expect((await tested(one)).value).toBe(1);
		const two = parseExpression('-P(0,0|0,0) - P(1,1|1,1)', { outputs, indexBase: 0 }).functional;
		expect((await tested(two)).value).toBe(0);
	});

	it('agrees with plain elimination in fractions, whatever the functional', async () => {
		const scenarios = [
			[
				[2, 2],
				[2, 2]
			],
			[
				[3, 2],
				[2, 2]
			],
			[[2, 2], [2], [2]]
		];
		for (let seed = 0; seed < 30; seed++) {
			const random = lehmer(seed);
			const f = randomFunctional(scenarios[seed % 3] ?? [], 1, random);
			const result = await tested(f);
			const { rank, saturating } = plainRank(f);
			expect(result.method).toMatchObject({ rank, saturating: String(saturating) });
			const other = relabelFunctional(f, randomRelabelling(f, random));
			expect((await tested(other)).value).toBe(result.value);
			const third = scaleFunctional(f, parseCoefficient('1/3'));
			expect((await tested(third)).value).toBe(result.value);
		}
	});

	it('looks at the least value for the minimum, without turning the answer', async () => {
		const f = parseExpression('P(0,0|0,0) + P(0,1|0,1)', { indexBase: 0 }).functional;
		for (const g of [familyFunctional({ name: 'chsh' }), f]) {
			const turned = scaleFunctional(g, parseCoefficient('-1'));
			const result = await solve({ ...facetProblem(g), sense: 'min' }, quietControl);
			expect(verifyResult(result)).toMatchObject({ checked: true });
			expect(result).toMatchObject({ value: (await tested(turned)).value });
		}
	});

	it('a constant is no facet', async () => {
		const f = functionalOfTerms([[2, 2], [3]], [['5', []]]);
		expect(await tested(f)).toMatchObject({ exact: '0', method: { rank: 9, dimension: 8 } });
	});

	it('stays exact for coefficients beyond 2^53', async () => {
		const large = parseCoefficient('1000000000000000000000007/3');
		const f = scaleFunctional(familyFunctional({ name: 'chsh' }), large);
		const result = await tested(f);
		expect(result).toMatchObject({ exact: '1' });
		expect(parseRational(String(result.method.localMaximum))?.mul(3).toFraction()).toBe(
			'2000000000000000000000014'
		);
	});

	it('refuses irrational coefficients and what is too large, with the figure', async () => {
		const root = scaleFunctional(familyFunctional({ name: 'chsh' }), parseCoefficient('sqrt(2)'));
		expect(await solve(facetProblem(root), quietControl)).toMatchObject({
			status: 'failed',
			reason: expect.stringContaining('rational')
		});
		const wide = familyFunctional({ name: 'chained', n: 30 });
		expect(await solve(facetProblem(wide), quietControl)).toMatchObject({
			status: 'limit',
			reason: expect.stringContaining('960 dimensions, more than the limit of 799')
		});
		const deep = familyFunctional({ name: 'chained', n: 20 });
		expect(await solve(facetProblem(deep), quietControl)).toMatchObject({
			status: 'limit',
			reason: expect.stringContaining('1048576 strategies')
		});
	});
});
