import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { eliminatesPositive, provePositivity, type IntegerTriangle } from './exact-positivity';

/** G G^T of rows with whole entries, moved by a multiple of the identity. */
function gram(rows: readonly (readonly bigint[])[], moved = 0n): bigint[][] {
	return rows.map((left, i) =>
		rows
			.slice(0, i + 1)
			.map(
				(right, j) =>
					left.reduce((sum, x, k) => sum + x * (right[k] ?? 0n), 0n) + (i === j ? moved : 0n)
			)
	);
}

function determinant(matrix: readonly (readonly bigint[])[]): bigint {
	const [first, ...rest] = matrix;
	if (!first) return 1n;
	return first.reduce((sum, entry, j) => {
		const minor = rest.map((row) => row.filter((_, k) => k !== j));
		return sum + (j % 2 === 0 ? entry : -entry) * determinant(minor);
	}, 0n);
}

/** By the definition: no principal minor is negative (Horn, Johnson, Matrix Analysis, 7.2.5). */
function isPositive(matrix: IntegerTriangle): boolean {
	const full = (i: number, j: number) => matrix[Math.max(i, j)]?.[Math.min(i, j)] ?? 0n;
	return Array.from({ length: 2 ** matrix.length }, (_, mask) => {
		const kept = [...matrix.keys()].filter((i) => (mask >> i) & 1);
		return determinant(kept.map((i) => kept.map((j) => full(i, j)))) >= 0n;
	}).every(Boolean);
}

const entry = fc.bigInt({ min: -4n, max: 4n });
const triangle = fc
	.integer({ min: 1, max: 4 })
	.chain((n) =>
		fc.tuple(
			...Array.from({ length: n }, (_, i) =>
				fc.array(entry, { minLength: i + 1, maxLength: i + 1 })
			)
		)
	);
const smallGram = fc
	.tuple(fc.integer({ min: 1, max: 4 }), fc.integer({ min: 1, max: 3 }))
	.chain(([n, rank]) =>
		fc.array(fc.array(entry, { minLength: rank, maxLength: rank }), { minLength: n, maxLength: n })
	)
	.map((rows) => gram(rows));

describe('positivity in whole numbers', () => {
	test('is what the principal minors say, singular or not', () => {
		fc.assert(
			fc.property(fc.oneof(triangle, smallGram), (matrix) => {
				const truth = isPositive(matrix);
				expect(eliminatesPositive(matrix)).toBe(truth);
				expect(provePositivity(matrix) !== null).toBe(truth);
			}),
			{ numRuns: 500 }
		);
	});

	test('a singular matrix is proved by elimination, and refused one unit lower', () => {
		const rows = Array.from({ length: 12 }, (_, i) =>
			Array.from(
				{ length: 5 },
				(_unused, k) => BigInt((i * i + 7 * i * k + 3 * k + 1) % 101) << 20n
			)
		);
		expect(provePositivity(gram(rows))).toBe('elimination');
		expect(provePositivity(gram(rows, -1n))).toBe(null);
	});

	test('the factor proves what is positive by more than rounding, and nothing else', () => {
		const entries = fc.array(
			fc.array(fc.bigInt({ min: -(2n ** 23n), max: 2n ** 23n }), { minLength: 3, maxLength: 3 }),
			{ minLength: 6, maxLength: 6 }
		);
		fc.assert(
			fc.property(entries, fc.bigInt({ min: -4n, max: 64n }), (rows, moved) => {
				const matrix = gram(rows, moved);
				const how = provePositivity(matrix);
				expect(how !== null).toBe(eliminatesPositive(matrix));
				if (moved < 0n) expect(how).toBe(null); // rank 3 of 6: some eigenvalue is `moved`
			})
		);
		expect(provePositivity([[2n ** 50n], [1n, 2n ** 50n]])).toBe('factor');
	});

	test('entries beyond doubles prove nothing, or by elimination', () => {
		expect(provePositivity([[10n ** 400n]])).toBe(null);
		expect(provePositivity([[2n ** 200n], [2n ** 200n, 2n ** 200n]])).toBe('elimination');
		expect(provePositivity([[2n ** 200n], [2n ** 200n + 1n, 2n ** 200n]])).toBe(null);
	});

	test('an elimination that would take long is not begun', () => {
		const ones = Array.from({ length: 200 }, (_, i) => new Array<bigint>(i + 1).fill(2n ** 50n));
		expect(provePositivity(ones)).toBe(null);
	});
});
