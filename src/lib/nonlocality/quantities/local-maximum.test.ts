import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	randomFunctional,
	randomRelabelling,
	rewrittenByNoSignalling
} from '../../../../tests/factories/random-functional';
import { lehmer, problemOn, quietControl } from '../../../../tests/factories/solver-problem';
import { checkDeterministicStrategy } from '../certificates/check-deterministic-strategy';
import { verifyResult } from '../certificates/verify';
import { parseCoefficient } from '../exact/expression';
import { ratio } from '../exact/rational';
import { SolverStop } from '../problem';
import { familyFunctional, type FamilySpec } from '../scenario/families';
import { scaleFunctional, type Functional } from '../scenario/functional';
import { relabelFunctional } from '../scenario/relabelling';
import { functionalOfTerms } from '../scenario/problem-terms';
import { localMaximum } from './local-maximum';
import { solve } from './solve';

function maximumOf(f: Functional) {
	return localMaximum(problemOn('local', f), f, quietControl);
}

/** Proves both sides again with the check's own plain enumeration. */
function checkedMaximum(f: Functional): string | null {
	const { exact, certificate } = maximumOf(f);
	if (certificate?.kind !== 'deterministic-strategy') throw new Error('no strategy');
	const outcome = checkDeterministicStrategy(f, certificate);
	if (!outcome.checked) throw new Error(outcome.reason);
	expect(outcome.exact).toBe(exact);
	return exact;
}

const SCENARIOS = [
	[
		[2, 2],
		[2, 2]
	],
	[
		[3, 2, 2],
		[2, 4]
	],
	[
		[2, 2],
		[2, 3],
		[2, 2]
	],
	[[2], [3, 2], [2, 2], [2]],
	[[3, 3, 3]]
];

describe('localMaximum', () => {
	it.each<[FamilySpec, string]>([
		// Svetlichny, Phys. Rev. D 35, 3066 (1987), in this normalisation 2^ceil(n/2); from memory
		[{ name: 'svetlichny', n: 3 }, '4'],
		[{ name: 'svetlichny', n: 4 }, '4'],
		// Mermin, Phys. Rev. Lett. 65, 1838 (1990): 2^floor(n/2); from memory
		[{ name: 'mermin', n: 5 }, '4'],
		// Almeida et al., Phys. Rev. Lett. 104, 230404 (2010): 2^-(n-1); from memory
		[{ name: 'gyni', n: 4 }, '1/8'],
		[{ name: 'gyni', n: 5 }, '1/16'],
		// Braunstein, Caves, Ann. Phys. 202, 22 (1990): 2n - 2; from memory
		[{ name: 'chained', n: 8 }, '14'],
		// Collins et al., Phys. Rev. Lett. 88, 040404 (2002): 2 for every d
		[{ name: 'cglmp', d: 6 }, '2']
	])('%o: %s', (spec, value) => {
		expect(checkedMaximum(familyFunctional(spec))).toBe(value);
	});

	it('agrees with plain enumeration, in any scenario', () => {
		const shape = fc.record({
			seed: fc.nat(),
			outputs: fc.constantFrom(...SCENARIOS),
			size: fc.constantFrom(1, 9)
		});
		fc.assert(
			fc.property(shape, ({ seed, outputs, size }) => {
				expect(checkedMaximum(randomFunctional(outputs, size, lehmer(seed)))).toMatch(/^-?\d+$/);
			}),
			{ numRuns: 150, seed: 1 }
		);
	});

	it('moves as it must under relabelling, no-signalling rewriting and scale', () => {
		fc.assert(
			fc.property(fc.nat(), (seed) => {
				const random = lehmer(seed);
				const f = randomFunctional(
					[
						[2, 2, 2],
						[3, 2]
					],
					9,
					random
				);
				const value = maximumOf(f).exact;
				expect(maximumOf(relabelFunctional(f, randomRelabelling(f, random))).exact).toBe(value);
				expect(maximumOf(rewrittenByNoSignalling(f, random)).exact).toBe(value);
				const tripled = maximumOf(scaleFunctional(f, parseCoefficient('3/7'))).exact;
				expect(tripled).toBe(ratio(BigInt(value ?? 0) * 3n, 7n).toFraction());
			}),
			{ numRuns: 60, seed: 2 }
		);
	});

	it('stays exact beyond 2^53', () => {
		const f = randomFunctional(
			[
				[2, 2, 2],
				[3, 3]
			],
			9,
			lehmer(4)
		);
		const large = scaleFunctional(f, parseCoefficient('100000000000000000000001'));
		expect(BigInt(checkedMaximum(large) ?? 0)).toBe(
			BigInt(checkedMaximum(f) ?? 0) * 100000000000000000000001n
		);
	});

	it('encloses an irrational maximum with an allowance for every rounding', () => {
		const f = scaleFunctional(familyFunctional({ name: 'elegant' }), parseCoefficient('sqrt(3)'));
		const result = maximumOf(f);
		// 6 sqrt(3) = 10.392304845413264376..., from a decimal of sqrt(3)
		expect(result.exact).toBeNull();
		expect(result.lower).toBeLessThan(10.39230484541326);
		expect(result.upper).toBeGreaterThan(10.39230484541327);
		expect((result.upper ?? 0) - (result.lower ?? 0)).toBeLessThan(1e-11);
	});

	it('ignores inputs that do not matter and answers them with output 0', () => {
		const f = functionalOfTerms(
			[
				[2, 2, 2],
				[2, 3]
			],
			[
				[
					'2',
					[
						[0, 1, 0],
						[1, 0, 1]
					]
				]
			]
		);
		expect(maximumOf(f)).toMatchObject({
			exact: '2',
			certificate: {
				strategy: [
					[0, 0, 0],
					[1, 0]
				],
				enumerated: '2'
			}
		});
	});

	it('refuses more than 2^26 strategies, and says so', () => {
		const outputs = [Array<number>(27).fill(2), Array<number>(27).fill(2)];
		const f = functionalOfTerms(
			outputs,
			Array.from(
				{ length: 27 },
				(_, x) =>
					[
						'1',
						[
							[0, x, 0],
							[1, x, 0]
						]
					] as const
			)
		);
		expect(() => maximumOf(f)).toThrow(SolverStop);
		expect(() => maximumOf(f)).toThrow(/134217728 .* limit of 67108864/);
	});

	it('stops when told to, and says what it knows when its time is over', async () => {
		const outputs = [Array<number>(24).fill(2), Array<number>(24).fill(2)];
		const f = randomFunctional(outputs, 3, lehmer(1));
		const start = performance.now();
		const stopped = await solve(problemOn('local', f), {
			...quietControl,
			shouldStop: () => performance.now() > start + 50
		});
		expect(stopped).toMatchObject({ status: 'cancelled' });
		expect(performance.now() - start).toBeLessThan(400);
		const late = await solve(problemOn('local', f, { seconds: 0.05 }), quietControl);
		expect(late).toMatchObject({
			status: 'done',
			guaranteed: { lower: true, upper: false },
			upper: null,
			value: null,
			exact: null,
			method: { strategies: 2 ** 24, ended: 'the budget was used up' }
		});
		expect(verifyResult(late)).toMatchObject({ checked: true, upper: null });
	});
});
