import type { Kernels } from '../linalg/kernels/kernels';
import { smallestTridiagonalEigenvalue } from '../linalg/symmetric-eigen';

/** Enough Lanczos steps to know the end of the spectrum to a per cent; few matrices need more. */
export const MOST_STEPS = 40;
const RELATIVE_PRECISION = 0.01;
/** Steps before the first look at the spectrum, and between two looks. */
const FIRST_LOOK = 4;
const LOOK_EVERY = 2;

/**
 * Largest step t with P + t D positive semidefinite, P = L L^T, estimated from below by Lanczos'
 * method on L^-1 D L^-T (Toh, SIAM J. Optim. 13, 2002): the caller still verifies the step.
 */
export class StepLength {
	readonly #kernels: Kernels;
	readonly #n: number;
	readonly #steps: number;
	readonly #start: Float64Array;
	/** One row per step, and one for the vector that comes next. */
	readonly #basis: Float64Array;
	readonly #rows: readonly Float64Array[];
	readonly #scratch: Float64Array;
	readonly #diagonal: Float64Array;
	readonly #offDiagonal: Float64Array;

	constructor(n: number, kernels: Kernels) {
		const steps = Math.min(n, MOST_STEPS);
		const basis = kernels.doubles((steps + 1) * n);
		this.#kernels = kernels;
		this.#n = n;
		this.#steps = steps;
		this.#start = startVector(n);
		this.#basis = basis;
		this.#rows = Array.from({ length: steps + 1 }, (_, k) => basis.subarray(k * n, (k + 1) * n));
		this.#scratch = kernels.doubles(2 * n);
		this.#diagonal = new Float64Array(steps);
		this.#offDiagonal = new Float64Array(steps);
	}

	/** @param inverse L^-1, lower triangle. @returns Infinity when D is positive semidefinite. */
	find(inverse: Float64Array, direction: Float64Array): number {
		const n = this.#n;
		const kernels = this.#kernels;
		const diagonal = this.#diagonal;
		const offDiagonal = this.#offDiagonal;
		let vector = this.#rows[0];
		vector?.set(this.#start);
		let smallest = 0;
		for (let step = 0; step < this.#steps; step++) {
			const next = this.#rows[step + 1];
			if (!vector || !next) break;
			kernels.conjugate(inverse, direction, vector, this.#scratch, next, n);
			diagonal[step] = kernels.dot(next, vector);
			kernels.orthogonalise(this.#basis, step + 1, next, n);
			const norm = Math.sqrt(kernels.dot(next, next));
			const last = step + 1 === n;
			const looks = step >= FIRST_LOOK && (step - FIRST_LOOK) % LOOK_EVERY === 0;
			if (last || looks || step + 1 === this.#steps || norm === 0) {
				smallest = smallestTridiagonalEigenvalue(diagonal, offDiagonal, step + 1);
				const tail = last ? 0 : norm * tailOfEigenvector(diagonal, offDiagonal, step + 1, smallest);
				if (last || step + 1 === this.#steps || tail <= RELATIVE_PRECISION * Math.abs(smallest)) {
					smallest -= tail;
					break;
				}
			}
			offDiagonal[step] = norm;
			for (let i = 0; i < n; i++) next[i] = (next[i] ?? 0) / norm;
			vector = next;
		}
		return smallest < 0 ? -1 / smallest : Infinity;
	}
}

/** Deterministic, and never orthogonal to a coordinate axis. */
function startVector(n: number): Float64Array {
	const vector = Float64Array.from({ length: n }, (_, i) => 1 + ((i * 7919) % 101) / 101);
	const norm = Math.sqrt(vector.reduce((sum, value) => sum + value * value, 0));
	return vector.map((value) => value / norm);
}

/** |last component| of the unit eigenvector: times the next norm it bounds the eigenvalue's error. */
function tailOfEigenvector(
	diagonal: Float64Array,
	offDiagonal: Float64Array,
	n: number,
	eigenvalue: number
): number {
	let previous = 0;
	let current = 1;
	let squares = 1;
	for (let i = 0; i + 1 < n; i++) {
		const off = offDiagonal[i] ?? 0;
		if (off === 0) return 0;
		const before = i > 0 ? (offDiagonal[i - 1] ?? 0) * previous : 0;
		const next = -(((diagonal[i] ?? 0) - eigenvalue) * current + before) / off;
		previous = current;
		current = next;
		squares += next * next;
	}
	return Math.abs(current) / Math.sqrt(squares);
}
