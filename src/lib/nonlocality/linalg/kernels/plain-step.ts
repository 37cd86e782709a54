import { dot } from '../dense';
import { smallestTridiagonalEigenvalue, tailOfEigenvector } from '../tridiagonal-eigen';

/** Enough Lanczos steps to know the end of the spectrum to a per cent; few matrices need more. */
export const MOST_STEPS = 40;
const RELATIVE_PRECISION = 0.01;
/** Of the eigenvalues of the small matrix, relative to its size. */
const EIGENVALUE_PRECISION = 1e-7;
/** Steps before the first look at the spectrum, and between two looks. */
const FIRST_LOOK = 4;
const LOOK_EVERY = 2;

/** Length of the array Kernels.largestStep works in: a basis, two vectors, a tridiagonal matrix. */
export function stepScratch(n: number): number {
	return (Math.min(n, MOST_STEPS) + 1) * n + 2 * n + 2 * MOST_STEPS;
}

/** Kernels.largestStep in plain TypeScript. */
export function largestStep(
	inverse: Float64Array,
	direction: Float64Array,
	scratch: Float64Array,
	n: number
): number {
	const steps = Math.min(n, MOST_STEPS);
	const vectors = (steps + 1) * n;
	const diagonal = scratch.subarray(vectors + 2 * n, vectors + 2 * n + MOST_STEPS);
	const offDiagonal = scratch.subarray(vectors + 2 * n + MOST_STEPS);
	fillStart(scratch, n);
	let smallest = 0;
	for (let step = 0; step < steps; step++) {
		const vector = scratch.subarray(step * n, (step + 1) * n);
		const next = scratch.subarray((step + 1) * n, (step + 2) * n);
		conjugate(inverse, direction, vector, scratch.subarray(vectors), next, n);
		diagonal[step] = dot(next, vector);
		orthogonalise(scratch, step + 1, next, n);
		const norm = Math.sqrt(dot(next, next));
		const last = step + 1 === steps;
		if (last || norm === 0 || (step >= FIRST_LOOK && (step - FIRST_LOOK) % LOOK_EVERY === 0)) {
			const count = step + 1;
			smallest = smallestTridiagonalEigenvalue(diagonal, offDiagonal, count, EIGENVALUE_PRECISION);
			const tail =
				count === n ? 0 : norm * tailOfEigenvector(diagonal, offDiagonal, count, smallest);
			if (last || tail <= RELATIVE_PRECISION * Math.abs(smallest)) {
				smallest -= tail;
				break;
			}
		}
		offDiagonal[step] = norm;
		for (let i = 0; i < n; i++) next[i] = (next[i] ?? 0) / norm;
	}
	return smallest < 0 ? -1 / smallest : Infinity;
}

/** A unit vector, deterministic and never orthogonal to a coordinate axis. */
function fillStart(vector: Float64Array, n: number): void {
	let squares = 0;
	for (let i = 0; i < n; i++) {
		const value = 1 + ((i * 7919) % 101) / 101;
		vector[i] = value;
		squares += value * value;
	}
	const norm = Math.sqrt(squares);
	for (let i = 0; i < n; i++) vector[i] = (vector[i] ?? 0) / norm;
}

/** out = L^-1 D L^-T v; `scratch` has 2 n entries. */
function conjugate(
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
function orthogonalise(basis: Float64Array, count: number, v: Float64Array, n: number): void {
	for (let pass = 0; pass < 2; pass++) {
		for (let row = 0; row < count * n; row += n) {
			let along = 0;
			for (let i = 0; i < n; i++) along += (v[i] ?? 0) * (basis[row + i] ?? 0);
			for (let i = 0; i < n; i++) v[i] = (v[i] ?? 0) - along * (basis[row + i] ?? 0);
		}
	}
}
