import type { Kernels } from '../linalg/kernels/kernels';

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

/**
 * A symmetric positive linear system that may be singular to working precision. Whoever uses it
 * writes the lower triangle of `matrix` and calls `factorise`.
 */
export class RegularisedSystem {
	/** Lower triangle: the factor; strict upper: the matrix itself, its diagonal in `#diagonal`. */
	readonly matrix: Float64Array;
	readonly #size: number;
	readonly #kernels: Kernels;
	readonly #poll: () => void;
	readonly #diagonal: Float64Array;
	readonly #solution: Float64Array;
	readonly #rest: Float64Array;
	/** Place in ADDITIONS. */
	#addition = 0;
	#altered = false;

	constructor(size: number, kernels: Kernels, poll: () => void) {
		this.matrix = kernels.doubles(size * size);
		this.#size = size;
		this.#kernels = kernels;
		this.#poll = poll;
		this.#diagonal = kernels.doubles(size);
		this.#solution = kernels.doubles(size);
		this.#rest = kernels.doubles(size);
	}

	/** Takes over what was written; false when it is singular whatever is added. */
	factorise(): boolean {
		const n = this.#size;
		this.#kernels.mirror(this.matrix, n, 'upper');
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
			if (this.#kernels.factorCholesky(this.matrix, this.#size, this.#poll)) return true;
		}
		this.#addition = ADDITIONS.length - 1;
		return false;
	}

	#restore(own: number, largest: number): void {
		const n = this.#size;
		const added = largest * this.#diagonal.reduce((a, value) => Math.max(a, value), 0);
		this.#kernels.mirror(this.matrix, n, 'lower');
		for (let i = 0; i < n; i++)
			this.matrix[i * n + i] = (this.#diagonal[i] ?? 0) * (1 + own) + added;
	}

	/** Solves roughly, with no refinement. @returns an array that the next solve overwrites. */
	solveOnce(rhs: Float64Array): Float64Array {
		this.#solution.set(rhs);
		this.#kernels.solveFactored(this.matrix, this.#size, this.#solution);
		return this.#solution;
	}

	/** Solves, with one step of iterative refinement. @returns an array as `solveOnce` does. */
	solve(rhs: Float64Array): Float64Array {
		const n = this.#size;
		const rest = this.#rest;
		const solution = this.solveOnce(rhs);
		rest.set(rhs);
		this.#poll();
		this.#kernels.subtractProduct(this.matrix, this.#diagonal, solution, rest, n);
		this.#poll();
		this.#kernels.solveFactored(this.matrix, n, rest);
		this.#kernels.addScaled(solution, 1, rest);
		return solution;
	}
}
