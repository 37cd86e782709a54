import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import {
	lehmer,
	problemOn,
	quietControl,
	solved
} from '../../../../tests/factories/solver-problem';
import { verifyResult } from '../certificates/verify';
import { exactCoefficient } from '../exact/coefficient';
import { parseCoefficient } from '../exact/expression';
import { ONE, ZERO, parseRational, ratio, type Rational } from '../exact/rational';
import type { HybridModel, Problem } from '../problem';
import { parseExpression } from '../scenario/expression';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { makeFunctional, scaleFunctional, type Functional } from '../scenario/functional';
import { relabelFunctional } from '../scenario/relabelling';
import type { Event } from '../scenario/scenario';
import { solve } from './solve';

function hybridProblem(f: Functional, model: HybridModel): Problem {
	return { ...problemOn('local', f), quantity: 'hybrid', model };
}

/** The exact maximum, proved again on both sides by the check. */
async function maximumOf(f: Functional, model: HybridModel): Promise<string | null> {
	const result = await solved(hybridProblem(f, model));
	expect(verifyResult(result)).toMatchObject({ checked: true, exact: result.exact });
	return result.exact;
}

const THREE = [
	[2, 2],
	[2, 2],
	[2, 2]
];

/** Random correlators of three parties: the sum of c_xyz A_x B_y C_z. */
function randomCorrelators(random: (below: number) => number) {
	const weights = Array.from({ length: 8 }, () => random(11) - 5);
	const terms = weights.flatMap((weight, index) => {
		const [x, y, z] = [index >> 2, (index >> 1) & 1, index & 1];
		return Array.from({ length: 8 }, (_, outputs) => {
			const [a, b, c] = [outputs >> 2, (outputs >> 1) & 1, outputs & 1];
			const sign = (a + b + c) % 2 === 0 ? 1 : -1;
			return {
				coefficient: exactCoefficient(ratio(BigInt(sign * weight))),
				events: [
					[0, x, a],
					[1, y, b],
					[2, z, c]
				] as Event[]
			};
		});
	});
	return { weights, functional: makeFunctional({ outputs: THREE }, terms) };
}

/**
 * Svetlichny's maximum of three parties' correlators in closed form: the group's product is an
 * arbitrary sign for each joint input, so the single party's two signs leave a sum of moduli.
 */
function svetlichnyOfCorrelators(weights: readonly number[]): number {
	let most = -Infinity;
	for (let single = 0; single < 3; single++) {
		for (const sign of [1, -1]) {
			let sum = 0;
			for (let joint = 0; joint < 4; joint++) {
				const low = joint & ((1 << (2 - single)) - 1);
				const index = ((joint - low) << 1) | low;
				const other = index | (1 << (2 - single));
				sum += Math.abs((weights[index] ?? 0) + sign * (weights[other] ?? 0));
			}
			most = Math.max(most, sum);
		}
	}
	return most;
}

type Box = (events: readonly Event[]) => Rational;

/** The 24 vertices of two parties, two inputs, two outputs (Barrett et al., PRA 71, 022101 (2005)). */
function twoPartyVertices(): Box[] {
	const boxes: Box[] = [];
	for (let s = 0; s < 16; s++)
		boxes.push((events) =>
			events.every(([p, x, a]) => ((s >> (2 * p + x)) & 1) === a) ? ONE : ZERO
		);
	for (let s = 0; s < 8; s++)
		boxes.push((events) => {
			const [first, second] = events;
			if (!first) return ONE;
			if (!second) return ratio(1n, 2n);
			const [, x, a] = first;
			const [, y, b] = second;
			const wanted = (x & y) ^ (s & 1 & x) ^ ((s >> 1) & 1 & y) ^ ((s >> 2) & 1);
			return (a ^ b) === wanted ? ratio(1n, 2n) : ZERO;
		});
	return boxes;
}

/** The no-signalling hybrid maximum of three parties as the largest value at products of vertices. */
function bestProduct(f: Functional): Rational {
	let most: Rational | null = null;
	for (let single = 0; single < 3; single++) {
		for (let strategy = 0; strategy < 4; strategy++) {
			for (const box of twoPartyVertices()) {
				let value = ZERO;
				for (const { coefficient, events } of f.terms) {
					const own = events.find(([p]) => p === single);
					if (own && ((strategy >> own[1]) & 1) !== own[2]) continue;
					const group = [0, 1, 2].filter((p) => p !== single);
					const rest = events.flatMap(([p, x, a]): Event[] =>
						p === single ? [] : [[group.indexOf(p), x, a]]
					);
					// one of two parties alone answers as its place says
					value = value.add((coefficient.exact ?? ZERO).mul(box(rest)));
				}
				if (most === null || value.compare(most) > 0) most = value;
			}
		}
	}
	return most ?? ZERO;
}

describe('hybridMaximum', () => {
	it.each<[FamilySpec, HybridModel, string]>([
		// Collins, Gisin, Popescu, Roberts, Scarani, Phys. Rev. Lett. 88, 170405 (2002): the hybrid
		// bound is the quantum one over sqrt 2, 2^(n-1) in this normalisation
		[{ name: 'svetlichny', n: 3 }, 'svetlichny', '4'],
		[{ name: 'svetlichny', n: 4 }, 'svetlichny', '8'],
		[{ name: 'svetlichny', n: 5 }, 'svetlichny', '16'],
		// there: model 2/1S reaches the algebraic maximum of Mermin's, 2 with a half of ours
		[{ name: 'mermin', n: 3 }, 'svetlichny', '4'],
		// The no-signalling sets lie within Svetlichny's, and deterministic products of PR boxes
		// reach the same: computed here, and by the products of vertices below
		[{ name: 'svetlichny', n: 3 }, 'no-signalling', '4'],
		[{ name: 'svetlichny', n: 4 }, 'no-signalling', '8'],
		[{ name: 'mermin', n: 3 }, 'no-signalling', '4']
	])('%o, %s: %s', async (spec, model, value) => {
		expect(await maximumOf(familyFunctional(spec), model)).toBe(value);
	});

	it('is 0 for an inequality of Bancal, Barrett, Gisin and Pironio', async () => {
		// Phys. Rev. A 88, 014102 (2013), with marginals of two parties, for time-ordered groups, which
		// contain the no-signalling ones; from memory. All outputs 1 at inputs 0 ... reach 0.
		const { functional } = parseExpression(
			'-2 P_AB(0,0|1,1) - 2 P_BC(0,0|1,1) - 2 P_AC(0,0|1,1) - P(0,0,0|0,0,1) - P(0,0,0|0,1,0)' +
				' - P(0,0,0|1,0,0) + 2 P(0,0,0|1,1,0) + 2 P(0,0,0|1,0,1) + 2 P(0,0,0|0,1,1)' +
				' + 2 P(0,0,0|1,1,1)',
			{ outputs: THREE, indexBase: 0 }
		);
		expect(await maximumOf(functional, 'no-signalling')).toBe('0');
	});

	it("agrees with the closed form for correlators in Svetlichny's model", async () => {
		for (let seed = 0; seed < 40; seed++) {
			const { weights, functional } = randomCorrelators(lehmer(seed));
			const expected = String(svetlichnyOfCorrelators(weights));
			expect(await maximumOf(functional, 'svetlichny')).toBe(expected);
		}
	});

	it('agrees with the best product of vertices in the no-signalling model', async () => {
		for (let seed = 0; seed < 12; seed++) {
			const f = randomFunctional(THREE, 9, lehmer(seed));
			const found = parseRational((await maximumOf(f, 'no-signalling')) ?? '');
			expect(found?.equals(bestProduct(f))).toBe(true);
		}
	});

	it('lies between its neighbours and moves as it must', async () => {
		const exact = async (problem: Problem) =>
			parseRational((await solved(problem)).exact ?? '') ?? ZERO;
		await fc.assert(
			fc.asyncProperty(fc.nat(), async (seed) => {
				const random = lehmer(seed);
				const { functional: f } = randomCorrelators(random);
				const local = await exact(problemOn('local', f));
				const narrow = await exact(hybridProblem(f, 'no-signalling'));
				const wide = await exact(hybridProblem(f, 'svetlichny'));
				const all = await exact(problemOn('no-signalling', f));
				expect(local.compare(narrow)).toBeLessThanOrEqual(0);
				expect(narrow.compare(wide)).toBeLessThanOrEqual(0);
				expect(narrow.compare(all)).toBeLessThanOrEqual(0);
				const other = relabelFunctional(f, randomRelabelling(f, random));
				for (const model of ['svetlichny', 'no-signalling'] as const) {
					const before = model === 'svetlichny' ? wide : narrow;
					expect((await exact(hybridProblem(other, model))).equals(before)).toBe(true);
					const third = scaleFunctional(f, parseCoefficient('1/3'));
					expect((await exact(hybridProblem(third, model))).mul(3).equals(before)).toBe(true);
				}
			}),
			{ numRuns: 12, seed: 5 }
		);
	});

	it('takes mixed numbers of outputs and inputs, and turns signs for the minimum', async () => {
		const f = randomFunctional([[3, 2], [2], [2, 2]], 5, lehmer(3));
		const result = await solved({ ...hybridProblem(f, 'no-signalling'), sense: 'min' });
		expect(verifyResult(result)).toMatchObject({ checked: true, exact: result.exact });
		const turned = await maximumOf(scaleFunctional(f, parseCoefficient('-1')), 'no-signalling');
		expect(result.exact).toBe(
			parseRational(turned ?? '')
				?.neg()
				.toFraction()
		);
	});

	it('encloses irrational values', async () => {
		const f = scaleFunctional(
			familyFunctional({ name: 'svetlichny', n: 3 }),
			parseCoefficient('sqrt(2)')
		);
		for (const model of ['svetlichny', 'no-signalling'] as const) {
			const result = await solved(hybridProblem(f, model));
			expect(verifyResult(result)).toMatchObject({ checked: true });
			expect(result.exact).toBeNull();
			// 4 sqrt(2) = 5.65685424949238019...
			expect(result.lower).toBeLessThan(5.6568542494923806);
			expect(result.upper).toBeGreaterThan(5.6568542494923797);
			expect((result.upper ?? 9) - (result.lower ?? 0)).toBeLessThan(1e-11);
		}
	});
});

describe('what the models cannot take', () => {
	it("marginals in Svetlichny's model, named", async () => {
		const f = parseExpression('A0 B0 C0 + A1 B1', { outputs: THREE, indexBase: 0 }).functional;
		const result = await solve(hybridProblem(f, 'svetlichny'), quietControl);
		expect(result).toMatchObject({
			status: 'failed',
			reason: expect.stringContaining('input 1 of party 0 and input 1 of party 1')
		});
		expect(await maximumOf(f, 'no-signalling')).toBe('2');
	});

	it('the writing plays no part: marginals that cancel are no marginals', async () => {
		const written = 'A0 B0 C0 + A1 B1 C1 + P_AB(0,0|0,0) - P(0,0,0|0,0,1) - P(0,0,1|0,0,1)';
		const f = parseExpression(written, { outputs: THREE, indexBase: 0 }).functional;
		expect(await maximumOf(f, 'svetlichny')).toBe('2');
	});

	it('a party that plays no part', async () => {
		const f = parseExpression('A0 B0 + A0 B1 + A1 B0 - A1 B1', { outputs: THREE, indexBase: 0 });
		for (const model of ['svetlichny', 'no-signalling'] as const)
			expect(await solve(hybridProblem(f.functional, model), quietControl)).toMatchObject({
				status: 'failed',
				reason: expect.stringContaining('does not depend on party 2')
			});
	});

	it('two parties', async () => {
		const result = await solve(
			hybridProblem(familyFunctional({ name: 'chsh' }), 'svetlichny'),
			quietControl
		);
		expect(result).toMatchObject({
			status: 'failed',
			reason: expect.stringContaining('three parties or more, not 2')
		});
	});

	it('too many strategies, vertices or programmes, with the figure', async () => {
		const wide = (inputs: number) => Array.from({ length: 4 }, () => Array<number>(inputs).fill(2));
		const product = (inputs: number) =>
			Array.from({ length: inputs }, (_, x) => `A${x} B${x} C${x} D${x}`).join(' + ');
		const f = (inputs: number) =>
			parseExpression(product(inputs), { outputs: wide(inputs), indexBase: 0 }).functional;
		const large = await solve(hybridProblem(f(4), 'no-signalling'), quietControl);
		expect(large).toMatchObject({
			status: 'limit',
			reason: expect.stringMatching(/more than 6000 vertices/)
		});
		const many = await solve(hybridProblem(f(6), 'svetlichny'), quietControl);
		expect(many).toMatchObject({
			status: 'limit',
			reason: expect.stringMatching(/20736 joint probabilities, more than the limit of 10000/)
		});
		const deep = await solve(
			hybridProblem(familyFunctional({ name: 'svetlichny', n: 6 }), 'svetlichny'),
			quietControl
		);
		expect(deep).toMatchObject({
			status: 'limit',
			reason: expect.stringMatching(/\d{9} joint strategies .* limit of 67108864/)
		});
	}, 60_000);
});
