import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { randomFunctional } from '../../../../tests/factories/random-functional';
import { lehmer, problemAbout, solved } from '../../../../tests/factories/solver-problem';
import type { Level } from '../problem';
import type { Functional } from '../scenario/functional';

/** What two solves of relaxations may differ by, as a share of the sum of |coefficients|. */
const SOLVER_DIFFERENCE = 3e-9;
const RUNS = 8;

const common = (f: Functional) => ({ ...problemAbout(f), seed: 1 }) as const;

const known = (side: number | null) => side ?? NaN;

async function upperOfLevel(f: Functional, level: Level, nonNegative = false): Promise<number> {
	return known((await solved({ ...common(f), quantity: 'npa', level, nonNegative })).upper);
}

async function lowerOfQuantum(f: Functional): Promise<number> {
	const problem = { ...common(f), seconds: 2, levels: [], dimensions: [2], gap: 0 } as const;
	return known((await solved({ ...problem, quantity: 'quantum' })).lower);
}

/** Two sides computed in different ways may each be rounded outward by this much. */
const slackOf = (f: Functional) =>
	SOLVER_DIFFERENCE * f.terms.reduce((sum, { coefficient: c }) => sum + Math.abs(c.value), 0);

describe('the bounds of a random functional stand in order', () => {
	const scenarios: { outputs: number[][]; levels: Level[]; implied: Level }[] = [
		{
			outputs: [
				[2, 2],
				[2, 2]
			],
			levels: [1, '1+AB', 2, 3],
			implied: '1+AB'
		},
		{
			outputs: [
				[2, 2, 2],
				[2, 2]
			],
			levels: [1, '1+AB', 2],
			implied: '1+AB'
		},
		{
			outputs: [
				[3, 3],
				[3, 2]
			],
			levels: [1, '1+AB', 2],
			implied: '1+AB'
		},
		{
			outputs: [
				[2, 2],
				[2, 2],
				[2, 2]
			],
			levels: [{ perParty: 1 }, 3],
			implied: { perParty: 1 }
		}
	];
	it.each(scenarios.map((each) => [JSON.stringify(each.outputs), each] as const))(
		'local <= quantum <= level k+1 <= level k, and <= no-signalling: %s',
		async (_, { outputs, levels, implied }) => {
			await fc.assert(
				fc.asyncProperty(fc.integer({ min: 0, max: 1e6 }), async (seed) => {
					const f = randomFunctional(outputs, 4, lehmer(seed));
					const slack = slackOf(f);
					const local = await solved({ ...common(f), quantity: 'local' });
					const noSignalling = await solved({ ...common(f), quantity: 'no-signalling' });
					const quantum = await lowerOfQuantum(f);
					expect(quantum).toBeGreaterThanOrEqual(known(local.lower));
					let looser = Infinity;
					for (const level of levels) {
						const upper = await upperOfLevel(f, level);
						expect(upper).toBeGreaterThanOrEqual(quantum);
						expect(upper).toBeLessThanOrEqual(looser + slack);
						looser = upper;
					}
					const withSigns = await upperOfLevel(f, levels[0] ?? 1, true);
					expect(withSigns).toBeLessThanOrEqual(known(noSignalling.upper) + slack);
					const upper = await upperOfLevel(f, implied);
					expect(upper).toBeLessThanOrEqual(known(noSignalling.upper) + slack);
				}),
				{ numRuns: RUNS }
			);
		},
		60_000
	);

	it('the bare level 1 may exceed the no-signalling maximum, with P >= 0 it does not', async () => {
		const f = randomFunctional(
			[
				[3, 3],
				[3, 3]
			],
			4,
			lehmer(4000)
		);
		const noSignalling = known((await solved({ ...common(f), quantity: 'no-signalling' })).upper);
		expect(await upperOfLevel(f, 1)).toBeGreaterThan(noSignalling + slackOf(f));
		expect(await upperOfLevel(f, 1, true)).toBeLessThanOrEqual(noSignalling + slackOf(f));
	});
});
