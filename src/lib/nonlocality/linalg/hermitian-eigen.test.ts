import { describe, expect, it } from 'vitest';
import { complexZeros, copyComplex, type ComplexArray } from './complex-dense';
import { hermitianEigen } from './hermitian-eigen';
import { seededRandom } from './seeded-random';

function randomHermitian(n: number, real: boolean, seed: number): ComplexArray {
	const random = seededRandom(seed);
	const a = complexZeros(n * n, real);
	for (let i = 0; i < n; i++) {
		for (let j = 0; j <= i; j++) {
			a.re[i * n + j] = a.re[j * n + i] = random.normal();
			if (a.im && i !== j) {
				const part = random.normal();
				a.im[i * n + j] = part;
				a.im[j * n + i] = -part;
			}
		}
	}
	return a;
}

/** max |A - sum_k values_k v_k v_k^H| and max |<v_k, v_l> - delta_kl|, from the definitions. */
function defects(a: ComplexArray, n: number) {
	const { values, vectors } = hermitianEigen(copyComplex(a), n);
	const at = (x: Float64Array | null, i: number) => x?.[i] ?? 0;
	let residual = 0;
	let orthogonality = 0;
	for (let i = 0; i < n; i++) {
		for (let j = 0; j < n; j++) {
			let re = -at(a.re, i * n + j);
			let im = -at(a.im, i * n + j);
			let dotRe = i === j ? -1 : 0;
			let dotIm = 0;
			for (let k = 0; k < n; k++) {
				const [p, q] = [at(vectors.re, k * n + i), at(vectors.im, k * n + i)];
				const [r, s] = [at(vectors.re, k * n + j), at(vectors.im, k * n + j)];
				re += at(values, k) * (p * r + q * s);
				im += at(values, k) * (q * r - p * s);
				const [t, u] = [at(vectors.re, i * n + k), at(vectors.im, i * n + k)];
				const [v, w] = [at(vectors.re, j * n + k), at(vectors.im, j * n + k)];
				dotRe += t * v + u * w;
				dotIm += t * w - u * v;
			}
			residual = Math.max(residual, Math.hypot(re, im));
			orthogonality = Math.max(orthogonality, Math.hypot(dotRe, dotIm));
		}
	}
	return { residual, orthogonality };
}

describe('hermitianEigen', () => {
	for (const real of [true, false]) {
		for (const n of [1, 2, 3, 5, 8, 20, 40]) {
			it(`decomposes a random ${real ? 'symmetric' : 'Hermitian'} matrix of size ${n}`, () => {
				const { residual, orthogonality } = defects(randomHermitian(n, real, n), n);
				expect(residual).toBeLessThan(1e-13 * (n + 5));
				expect(orthogonality).toBeLessThan(1e-14 * (n + 5));
			});
		}
	}

	it('keeps degenerate and zero matrices orthogonal', () => {
		const projector = complexZeros(16, false);
		for (let i = 0; i < 16; i++) projector.re[i] = 0.25; // the rank-one projector on (1,1,1,1)/2
		expect(defects(projector, 4).residual).toBeLessThan(1e-15);
		expect(defects(complexZeros(9, false), 3)).toEqual({ residual: 0, orthogonality: 0 });
	});

	it('finds the known spectrum of a Pauli matrix', () => {
		const y = complexZeros(4, false);
		if (y.im) y.im.set([0, -1, 1, 0]);
		const [low, high] = [...hermitianEigen(y, 2).values].sort((a, b) => a - b);
		expect(low).toBeCloseTo(-1, 14);
		expect(high).toBeCloseTo(1, 14);
	});
});

describe('degenerate matrices', () => {
	it('has no eigenvalues without rows', () => {
		expect(hermitianEigen(complexZeros(0, true), 0).values).toHaveLength(0);
	});

	it('refuses entries that are not finite', () => {
		const matrix = complexZeros(9, true);
		matrix.re.fill(NaN);
		expect(() => hermitianEigen(matrix, 3)).toThrow(/did not converge/);
	});
});
