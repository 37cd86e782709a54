import fc from 'fast-check';
import { expect, it } from 'vitest';
import { lehmer } from '../../../../tests/factories/solver-problem';
import { ratio } from '../exact/rational';
import { solveExactly } from './exact-linear-system';

function randomRows(n: number, random: (below: number) => number) {
	return Array.from({ length: n }, () =>
		Array.from({ length: n }, (_, c) => [c, random(5) - 2] as const)
	);
}

it('finds rational solutions exactly: B x = b for x chosen beforehand', () => {
	fc.assert(
		fc.property(fc.nat(), fc.integer({ min: 1, max: 12 }), (seed, n) => {
			const random = lehmer(seed);
			const rows = randomRows(n, random);
			const integers = Array.from({ length: n }, () => BigInt(random(2_000_001) - 1_000_000));
			const rightSide = rows.map((row) =>
				row.reduce((sum, [c, v]) => sum + BigInt(v) * (integers[c] ?? 0n), 0n)
			);
			const solution = solveExactly(rows, rightSide, () => {});
			if (solution === null) return; // singular
			expect(solution.map((x) => x.toFraction())).toEqual(integers.map(String));
		}),
		{ seed: 5 }
	);
});

it('solves a system whose solution is no integer', () => {
	// [[2, 1], [1, 3]] x = (1, 1): x = (2/5, 1/5)
	const rows = [
		[
			[0, 2],
			[1, 1]
		],
		[
			[0, 1],
			[1, 3]
		]
	] as const;
	expect(solveExactly(rows, [1n, 1n], () => {})).toEqual([ratio(2n, 5n), ratio(1n, 5n)]);
});

it('gives no answer for a singular system', () => {
	const rows = [
		[
			[0, 1],
			[1, 2]
		],
		[
			[0, 2],
			[1, 4]
		]
	] as const;
	expect(solveExactly(rows, [1n, 0n], () => {})).toBeNull();
});

it('leaves a system of more than 800 rows alone', () => {
	const rows = Array.from({ length: 801 }, (_, i) => [[i, 1] as const]);
	const rightSide = rows.map(() => 1n);
	expect(solveExactly(rows, rightSide, () => {})).toBeNull();
});
