import { factorCholesky, solveFactored } from '../linalg/cholesky';

/**
 * Additions to the diagonal of the Schur complement, tried when it is not positive: relative to each
 * entry, then to the largest. The latter is the size of the rounding errors, under which entries
 * that belong to moments free at the optimum vanish.
 */
const NO_ADDITION = { own: 0, largest: 0 };
const ADDITIONS = [
	NO_ADDITION,
	{ own: 1e-15, largest: 0 },
	{ own: 1e-14, largest: 0 },
	{ own: 1e-13, largest: 0 },
	{ own: 0, largest: 1e-16 },
	{ own: 0, largest: 1e-15 },
	{ own: 0, largest: 1e-14 },
	{ own: 0, largest: 1e-13 }
];
const TILE = 32; // both triangles of a tile stay in the cache

/**
 * A symmetric positive linear system that may be singular to working precision. Whoever uses it
 * writes the lower triangle of `matrix` and calls `factorise`.
 */
export class RegularisedSystem {
	/** Lower triangle: the factor; strict upper: the matrix itself, its diagonal in `#diagonal`. */
	readonly matrix: Float64Array;
	readonly #size: number;
	readonly #diagonal: Float64Array;
	readonly #poll: () => void;
	/** Place in ADDITIONS. */
	#addition = 0;
	#altered = false;

	constructor(size: number, poll: () => void) {
		this.matrix = new Float64Array(size * size);
		this.#size = size;
		this.#diagonal = new Float64Array(size);
		this.#poll = poll;
	}

	/** Takes over what was written; false when it is singular whatever is added. */
	factorise(): boolean {
		const n = this.#size;
		for (let i0 = 0; i0 < n; i0 += TILE) {
			this.#poll();
			for (let j0 = 0; j0 <= i0; j0 += TILE)
				for (let i = i0; i < Math.min(i0 + TILE, n); i++)
					for (let j = j0; j < Math.min(j0 + TILE, i); j++)
						this.matrix[j * n + i] = this.matrix[i * n + j] ?? 0;
		}
		for (let i = 0; i < n; i++) this.#diagonal[i] = this.matrix[i * n + i] ?? 0;
		this.#altered = false;
		return this.#factor();
	}

	/** Factorises again, with a larger addition to the diagonal; false when there is none left. */
	regularise(): boolean {
		this.#addition++;
		return this.#factor();
	}

	/** Tries the additions from the one in use: the conditioning only worsens towards the optimum. */
	#factor(): boolean {
		for (; this.#addition < ADDITIONS.length; this.#addition++) {
			const { own, largest } = ADDITIONS[this.#addition] ?? NO_ADDITION;
			if (this.#altered || this.#addition > 0) this.#restore(own, largest);
			this.#altered = true;
			if (factorCholesky(this.matrix, this.#size, this.#poll)) return true;
		}
		this.#addition = ADDITIONS.length - 1;
		return false;
	}

	#restore(own: number, largest: number): void {
		const n = this.#size;
		const added = largest * this.#diagonal.reduce((a, value) => Math.max(a, value), 0);
		for (let i = 0; i < n; i++) {
			for (let j = 0; j < i; j++) this.matrix[i * n + j] = this.matrix[j * n + i] ?? 0;
			this.matrix[i * n + i] = (this.#diagonal[i] ?? 0) * (1 + own) + added;
		}
	}

	/** Solves, with one step of iterative refinement. */
	solve(rhs: Float64Array): Float64Array {
		const n = this.#size;
		const { matrix } = this;
		const solution = rhs.slice();
		solveFactored(matrix, n, solution);
		this.#poll();
		const rest = rhs.slice();
		for (let i = 0; i < n; i++) {
			const row = i * n;
			const value = solution[i] ?? 0;
			let sum = (this.#diagonal[i] ?? 0) * value;
			for (let j = i + 1; j < n; j++) {
				const entry = matrix[row + j] ?? 0;
				sum += entry * (solution[j] ?? 0);
				rest[j] = (rest[j] ?? 0) - entry * value;
			}
			rest[i] = (rest[i] ?? 0) - sum;
		}
		this.#poll();
		solveFactored(matrix, n, rest);
		for (let i = 0; i < n; i++) solution[i] = (solution[i] ?? 0) + (rest[i] ?? 0);
		return solution;
	}
}
