import fc from 'fast-check';
import { expect, test } from 'vitest';
import { provePositivity } from '../certificates/exact-positivity';
import { confirmedShift } from './confirmed-shift';

/** Lower triangle of G G^T + moved * 1, row by row. */
function gram(rows: readonly (readonly bigint[])[], moved: bigint): bigint[] {
	return rows.flatMap((left, i) =>
		rows
			.slice(0, i + 1)
			.map(
				(right, j) =>
					left.reduce((sum, x, k) => sum + x * (right[k] ?? 0n), 0n) + (i === j ? moved : 0n)
			)
	);
}

function triangleOf(entries: readonly bigint[], n: number, shift: bigint): bigint[][] {
	return Array.from({ length: n }, (_, i) =>
		Array.from(
			{ length: i + 1 },
			(_unused, j) => (entries[(i * (i + 1)) / 2 + j] ?? 0n) + (i === j ? shift : 0n)
		)
	);
}

const rowsOf = (n: number, rank: number) =>
	fc.array(
		fc.array(fc.bigInt({ min: -(2n ** 24n), max: 2n ** 24n }), {
			minLength: rank,
			maxLength: rank
		}),
		{ minLength: n, maxLength: n }
	);

test('a confirmed shift is one that the check proves too, and a small one', () => {
	fc.assert(
		fc.property(
			rowsOf(12, 12),
			rowsOf(12, 4),
			fc.bigInt({ min: -40n, max: 40n }),
			(a, b, moved) => {
				for (const rows of [a, b]) {
					const entries = gram(rows, moved);
					const shift = confirmedShift(entries, 12, () => {});
					if (shift === null) continue;
					expect(provePositivity(triangleOf(entries, 12, shift))).toBe('factor');
					expect(shift).toBeLessThan(2n ** 14n); // of a trace of some 2^53
				}
			}
		),
		{ numRuns: 40 }
	);
	expect(confirmedShift(gram([[3n], [4n]], 100n), 2, () => {})).toBe(0n);
});

test('none for a matrix far from positive; the poll ends it', () => {
	expect(confirmedShift([1n, 2n ** 40n, 1n], 2, () => {})).toBe(null);
	const stop = () => {
		throw new Error('stopped');
	};
	expect(() => confirmedShift([1n, 0n, 1n], 2, stop)).toThrow('stopped');
});
