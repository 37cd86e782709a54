import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { randomFunctional, randomRelabelling } from '../../../../tests/factories/random-functional';
import { lehmer, problemAbout, solved } from '../../../../tests/factories/solver-problem';
import { exactCoefficient } from '../exact/coefficient';
import { parseRational, printRational, ratio, type Rational } from '../exact/rational';
import type { DoneResult, Problem } from '../problem';
import { makeFunctional, scaleFunctional, type Functional } from '../scenario/functional';
import { relabelFunctional } from '../scenario/relabelling';

const RUNS = 5;
/** Of two solves of one relaxation, and of two searches that found the same strategy. */
const SOLVER_DIFFERENCE = 3e-9;
const SEARCH_DIFFERENCE = 1e-6;

const constant = (n: bigint, d = 1n) => exactCoefficient(ratio(n, d));

type Change = (f: Functional, random: (below: number) => number) => Functional;

const relabelled: Change = (f, random) => relabelFunctional(f, randomRelabelling(f, random));

const scaled: Change = (f) => scaleFunctional(f, constant(7n, 3n));

const shifted: Change = (f) =>
	makeFunctional(f.scenario, [...f.terms, { coefficient: constant(-5n, 4n), events: [] }]);

/** One more input, with another number of outputs, that the functional does not look at. */
const withUnusedInput: Change = (f, random) => {
	const party = random(f.scenario.outputs.length);
	const outputs = f.scenario.outputs.map((counts, p) => (p === party ? [...counts, 3] : counts));
	return makeFunctional({ outputs }, f.terms);
};

/** One more output of one input that scores as its output 0 does: splitting it wins nothing. */
const withOutputTwice: Change = (f, random) => {
	const party = random(f.scenario.outputs.length);
	const input = random(f.scenario.outputs[party]?.length ?? 1);
	const added = f.scenario.outputs[party]?.[input] ?? 2;
	const outputs = f.scenario.outputs.map((counts, p) =>
		p === party ? counts.map((count, x) => (x === input ? count + 1 : count)) : counts
	);
	const copies = f.terms.flatMap(({ coefficient, events }) => {
		const place = events.findIndex(([p, x, a]) => p === party && x === input && a === 0);
		return place < 0
			? []
			: [{ coefficient, events: events.with(place, [party, input, added] as const) }];
	});
	return makeFunctional({ outputs }, [...f.terms, ...copies]);
};

/** What the change does to every maximum: v becomes scale v + shift. */
const CHANGES: readonly (readonly [
	name: string,
	change: Change,
	scale: Rational,
	shift: Rational
])[] = [
	['relabelling', relabelled, ratio(1n), ratio(0n)],
	['scaling', scaled, ratio(7n, 3n), ratio(0n)],
	['a constant', shifted, ratio(1n), ratio(-5n, 4n)],
	['an unused input', withUnusedInput, ratio(1n), ratio(0n)],
	['an output twice', withOutputTwice, ratio(1n), ratio(0n)]
];

type Quantity = 'local' | 'no-signalling' | 'npa' | 'see-saw';

function problemOf(f: Functional, quantity: Quantity): Problem {
	const common = { ...problemAbout(f), seed: 3 } as const;
	const parties = f.scenario.outputs.length;
	if (quantity === 'npa')
		return {
			...common,
			quantity,
			level: parties === 2 ? '1+AB' : { perParty: 1 },
			nonNegative: false
		};
	if (quantity === 'see-saw')
		return { ...common, quantity, dimension: [2], starts: 30, state: 'free' };
	return { ...common, quantity };
}

const SCENARIOS: readonly number[][][] = [
	[
		[2, 2],
		[2, 2]
	],
	[
		[2, 2, 2],
		[2, 3]
	],
	[
		[2, 2],
		[2, 2],
		[2, 2]
	]
];

const sizeOf = (f: Functional) =>
	f.terms.reduce((sum, { coefficient: c }) => sum + Math.abs(c.value), 1);

describe.each(CHANGES)('%s moves every value as it must', (_, change, scale, shift) => {
	const eachCase = (check: (f: Functional, changed: Functional) => Promise<void>) =>
		fc.assert(
			fc.asyncProperty(
				fc.integer({ min: 0, max: 1e6 }),
				fc.constantFrom(...SCENARIOS),
				(seed, outputs) => {
					const random = lehmer(seed);
					const f = randomFunctional(outputs, 4, random);
					return check(f, change(f, random));
				}
			),
			{ numRuns: RUNS }
		);

	it.each(['local', 'no-signalling'] as const)('%s, exactly', async (quantity) => {
		await eachCase(async (f, changed) => {
			const before = await solved(problemOf(f, quantity));
			const after = await solved(problemOf(changed, quantity));
			const moved = exactOf(before).mul(scale).add(shift);
			expect(printRational(exactOf(after))).toBe(printRational(moved));
		});
	});

	it('a relaxation, within its rounding', async () => {
		await eachCase(async (f, changed) => {
			const before = await solved(problemOf(f, 'npa'));
			const after = await solved(problemOf(changed, 'npa'));
			const slack = SOLVER_DIFFERENCE * Math.max(sizeOf(f), sizeOf(changed));
			for (const side of ['lower', 'upper'] as const)
				expect(
					Math.abs((after[side] ?? NaN) - Number(scale) * (before[side] ?? NaN) - Number(shift))
				).toBeLessThan(slack);
		});
	});

	it('a strategy found, from the same number of starts', async () => {
		await eachCase(async (f, changed) => {
			const before = await solved(problemOf(f, 'see-saw'));
			const after = await solved(problemOf(changed, 'see-saw'));
			const slack = SEARCH_DIFFERENCE * sizeOf(f);
			const expected = Number(scale) * (before.lower ?? NaN) + Number(shift);
			expect(Math.abs((after.lower ?? NaN) - expected)).toBeLessThan(slack);
		});
	});
});

function exactOf({ exact }: DoneResult): Rational {
	const value = parseRational(exact ?? '');
	if (!value) throw new Error('no exact value');
	return value;
}
