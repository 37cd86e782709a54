import { factorCholesky, invertFactor, inverseFromFactor, solveFactored } from '../cholesky';
import { addScaled, dot, multiply, symmetrise } from '../dense';
import type { Kernels } from './kernels';
import { PlainSchur } from './plain-schur';
import { largestStep } from './plain-step';
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
	readonly largestStep = largestStep;
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
