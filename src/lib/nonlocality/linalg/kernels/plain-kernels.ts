import { factorCholesky, invertFactor, inverseFromFactor, solveFactored } from '../cholesky';
import { addScaled, dot, multiply, symmetrise } from '../dense';
import type { Kernels } from './kernels';
import { PlainSchur } from './plain-schur';
import type { Supports } from './supports';

/** The kernels in plain TypeScript, on arrays of the ordinary heap. */
export class PlainKernels implements Kernels {
	readonly kind = 'plain';
	readonly dot = dot;
	readonly addScaled = addScaled;
	readonly multiply = multiply;
	readonly symmetrise = symmetrise;
	readonly factorCholesky = factorCholesky;
	readonly solveFactored = solveFactored;
	readonly invertFactor = invertFactor;
	readonly inverseFromFactor = inverseFromFactor;
	#schur: PlainSchur | null = null;

	doubles(length: number): Float64Array {
		return new Float64Array(length);
	}

	integers(length: number): Int32Array {
		return new Int32Array(length);
	}

	release(): void {
		this.#schur = null;
	}

	mirror(a: Float64Array, n: number, to: 'upper' | 'lower'): void {
		const tile = 32; // both triangles of a tile stay in the cache
		for (let i0 = 0; i0 < n; i0 += tile) {
			for (let j0 = 0; j0 <= i0; j0 += tile) {
				for (let i = i0; i < Math.min(i0 + tile, n); i++) {
					for (let j = j0; j < Math.min(j0 + tile, i); j++) {
						if (to === 'upper') a[j * n + i] = a[i * n + j] ?? 0;
						else a[i * n + j] = a[j * n + i] ?? 0;
					}
				}
			}
		}
	}

	subtractProduct(
		matrix: Float64Array,
		diagonal: Float64Array,
		x: Float64Array,
		rest: Float64Array,
		n: number
	): void {
		for (let i = 0; i < n; i++) {
			const row = i * n;
			const value = x[i] ?? 0;
			let sum = (diagonal[i] ?? 0) * value;
			for (let j = i + 1; j < n; j++) {
				const entry = matrix[row + j] ?? 0;
				sum += entry * (x[j] ?? 0);
				rest[j] = (rest[j] ?? 0) - entry * value;
			}
			rest[i] = (rest[i] ?? 0) - sum;
		}
	}

	conjugate(
		inverse: Float64Array,
		direction: Float64Array,
		v: Float64Array,
		scratch: Float64Array,
		out: Float64Array,
		n: number
	): void {
		scratch.fill(0, 0, n);
		for (let i = 0; i < n; i++) {
			const value = v[i] ?? 0;
			const row = i * n;
			for (let j = 0; j <= i; j++) scratch[j] = (scratch[j] ?? 0) + value * (inverse[row + j] ?? 0);
		}
		for (let i = 0; i < n; i++) {
			let sum = 0;
			for (let j = 0; j < n; j++) sum += (direction[i * n + j] ?? 0) * (scratch[j] ?? 0);
			scratch[n + i] = sum;
		}
		for (let i = 0; i < n; i++) {
			let sum = 0;
			for (let j = 0; j <= i; j++) sum += (inverse[i * n + j] ?? 0) * (scratch[n + j] ?? 0);
			out[i] = sum;
		}
	}

	/** Twice, since once loses orthogonality when the vector nearly vanishes. */
	orthogonalise(basis: Float64Array, count: number, v: Float64Array, n: number): void {
		for (let pass = 0; pass < 2; pass++) {
			for (let row = 0; row < count * n; row += n) {
				let along = 0;
				for (let i = 0; i < n; i++) along += (v[i] ?? 0) * (basis[row + i] ?? 0);
				for (let i = 0; i < n; i++) v[i] = (v[i] ?? 0) - along * (basis[row + i] ?? 0);
			}
		}
	}

	buildSchur(
		supports: Supports,
		x: Float64Array,
		w: Float64Array,
		matrix: Float64Array,
		poll: () => void
	): void {
		if (this.#schur?.supports !== supports) this.#schur = new PlainSchur(supports);
		this.#schur.build(x, w, matrix, poll);
	}
}
