import { smallestTridiagonalEigenvalue } from '../linalg/symmetric-eigen';

/** Enough Lanczos steps to know the end of the spectrum to a per cent; few matrices need more. */
const MOST_STEPS = 40;
const RELATIVE_PRECISION = 0.01;

/**
 * Largest step t with P + t D positive semidefinite, P = L L^T, estimated from below by Lanczos'
 * method on L^-1 D L^-T (Toh, SIAM J. Optim. 13, 2002): the caller still verifies the step.
 * @param inverse L^-1, lower triangle. @returns Infinity when D itself is positive semidefinite.
 */
export function largestStep(inverse: Float64Array, direction: Float64Array, n: number): number {
	const basis: Float64Array[] = [];
	const diagonal: number[] = [];
	const offDiagonal: number[] = [];
	let vector = startVector(n);
	let smallest = 0;
	for (let step = 0; step < Math.min(n, MOST_STEPS); step++) {
		basis.push(vector);
		const next = applyScaled(inverse, direction, vector, n);
		let along = 0;
		for (let i = 0; i < n; i++) along += (next[i] ?? 0) * (vector[i] ?? 0);
		diagonal.push(along);
		orthogonalise(next, basis);
		const norm = Math.hypot(...next);
		smallest = smallestTridiagonalEigenvalue(diagonal, offDiagonal);
		const tail = norm * tailOfEigenvector(diagonal, offDiagonal, smallest);
		const scale = Math.max(Math.abs(smallest), 1e-12);
		if (step + 1 === n || tail <= RELATIVE_PRECISION * scale) {
			smallest -= step + 1 === n ? 0 : tail;
			break;
		}
		if (step + 1 === MOST_STEPS) smallest -= tail;
		offDiagonal.push(norm);
		for (let i = 0; i < n; i++) next[i] = (next[i] ?? 0) / norm;
		vector = next;
	}
	return smallest < 0 ? -1 / smallest : Infinity;
}

/** Deterministic, and never orthogonal to a coordinate axis. */
function startVector(n: number): Float64Array {
	const vector = Float64Array.from({ length: n }, (_, i) => 1 + ((i * 7919) % 101) / 101);
	const norm = Math.hypot(...vector);
	return vector.map((value) => value / norm);
}

/** L^-1 D L^-T v. */
function applyScaled(
	inverse: Float64Array,
	direction: Float64Array,
	v: Float64Array,
	n: number
): Float64Array {
	const first = new Float64Array(n);
	for (let i = 0; i < n; i++) {
		const value = v[i] ?? 0;
		const row = i * n;
		for (let j = 0; j <= i; j++) first[j] = (first[j] ?? 0) + value * (inverse[row + j] ?? 0);
	}
	const second = new Float64Array(n);
	for (let i = 0; i < n; i++) {
		let sum = 0;
		for (let j = 0; j < n; j++) sum += (direction[i * n + j] ?? 0) * (first[j] ?? 0);
		second[i] = sum;
	}
	for (let i = n - 1; i >= 0; i--) {
		let sum = 0;
		for (let j = 0; j <= i; j++) sum += (inverse[i * n + j] ?? 0) * (second[j] ?? 0);
		second[i] = sum;
	}
	return second;
}

/** Twice, since once loses orthogonality when the vector nearly vanishes. */
function orthogonalise(vector: Float64Array, basis: readonly Float64Array[]): void {
	for (let pass = 0; pass < 2; pass++) {
		for (const other of basis) {
			let along = 0;
			for (let i = 0; i < vector.length; i++) along += (vector[i] ?? 0) * (other[i] ?? 0);
			for (let i = 0; i < vector.length; i++)
				vector[i] = (vector[i] ?? 0) - along * (other[i] ?? 0);
		}
	}
}

/** |last component| of the unit eigenvector: times the next norm it bounds the eigenvalue's error. */
function tailOfEigenvector(
	diagonal: readonly number[],
	offDiagonal: readonly number[],
	eigenvalue: number
): number {
	let previous = 0;
	let current = 1;
	let squares = 1;
	for (let i = 0; i + 1 < diagonal.length; i++) {
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
