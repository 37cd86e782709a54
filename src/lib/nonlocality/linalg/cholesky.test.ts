import { describe, expect, test } from 'vitest';
import { factorCholesky, invertFactor, inverseFromFactor, solveFactored } from './cholesky';
import { multiply } from './dense';
import { smallestTridiagonalEigenvalue } from './symmetric-eigen';

/** Park and Miller's generator: the same matrices every time. */
function generator(seed: number) {
	let state = seed;
	return () => (state = (state * 16807) % 2147483647) / 2147483647 - 0.5;
}

/** B B^T + 1: well conditioned. */
function positive(n: number): Float64Array {
	const next = generator(n);
	const b = Float64Array.from({ length: n * n }, () => next());
	const transposed = b.map((_, cell) => b[(cell % n) * n + Math.floor(cell / n)] ?? 0);
	const product = new Float64Array(n * n);
	multiply(b, transposed, product, n);
	for (let i = 0; i < n; i++) product[i * n + i] = (product[i * n + i] ?? 0) + 1;
	return product;
}

/** Sizes on both sides of the panel width and of the tiles. */
const SIZES = [1, 2, 5, 31, 32, 33, 64, 65, 66, 67, 101, 130];

describe('Cholesky', () => {
	test.each(SIZES)('L L^T is the matrix, n = %i', (n) => {
		const a = positive(n);
		const l = a.slice();
		expect(factorCholesky(l, n)).toBe(true);
		let worst = 0;
		for (let i = 0; i < n; i++) {
			for (let j = 0; j <= i; j++) {
				let sum = 0;
				for (let k = 0; k <= j; k++) sum += (l[i * n + k] ?? 0) * (l[j * n + k] ?? 0);
				worst = Math.max(worst, Math.abs(sum - (a[i * n + j] ?? 0)));
			}
			for (let j = i + 1; j < n; j++) expect(l[i * n + j]).toBe(a[i * n + j]);
		}
		expect(worst).toBeLessThan(1e-12 * n);
	});
	test.each(SIZES)('solves and inverts, n = %i', (n) => {
		const a = positive(n);
		const l = a.slice();
		factorCholesky(l, n);
		const x = Float64Array.from({ length: n }, (_, i) => i + 1);
		const b = x.map((_, i) => x.reduce((sum, value, j) => sum + (a[i * n + j] ?? 0) * value, 0));
		solveFactored(l, n, b);
		b.forEach((value, i) => expect(Math.abs(value - (x[i] ?? 0))).toBeLessThan(1e-9 * n));
		const inverseFactor = new Float64Array(n * n);
		const inverse = new Float64Array(n * n);
		const product = new Float64Array(n * n);
		invertFactor(l, n, inverseFactor);
		inverseFromFactor(inverseFactor, n, inverse);
		multiply(a, inverse, product, n);
		product.forEach((value, cell) => {
			const expected = cell % (n + 1) === 0 ? 1 : 0;
			expect(Math.abs(value - expected)).toBeLessThan(1e-10);
		});
	});
	test.each([5, 40, 100])('an indefinite matrix is refused, n = %i', (n) => {
		const a = positive(n);
		a[n * n - 1] = -1;
		expect(factorCholesky(a, n)).toBe(false);
		const broken = positive(n);
		broken[0] = NaN;
		expect(factorCholesky(broken, n)).toBe(false);
	});
});

test('the smallest eigenvalue of the path is 2 - 2 cos(pi / (n + 1))', () => {
	const n = 12;
	const off = Array.from({ length: n - 1 }, () => -1);
	const diagonal = Array.from({ length: n }, () => 2);
	expect(smallestTridiagonalEigenvalue(diagonal, off)).toBeCloseTo(
		2 - 2 * Math.cos(Math.PI / (n + 1)),
		13
	);
});
