import { tailOfEigenvector } from '../linalg/tridiagonal-eigen';

/** Lanczos steps after which the end of the spectrum is known well enough, and between two looks. */
const MOST_STEPS = 40;
const STEPS_BETWEEN_LOOKS = 4;
const RELATIVE_PRECISION = 0.01;
/** Of an eigenvalue of the tridiagonal matrix; steps stop short of the boundary by more. */
const BISECTION_PRECISION = 1e-3;

/**
 * Largest step t with P + t D positive semidefinite, P = L L^T, estimated from below by Lanczos'
 * method on L^-1 D L^-T (Toh, SIAM J. Optim. 13, 2002): the caller still verifies the step. For the
 * many small blocks of a block programme: few allocations, and eigenvalues no better than needed.
 * @param inverse L^-1, lower triangle. @returns Infinity when D itself is positive semidefinite.
 */
export function largestBlockStep(
	inverse: Float64Array,
	direction: Float64Array,
	n: number
): number {
	if (n === 1) {
		const value = (inverse[0] ?? 0) ** 2 * (direction[0] ?? 0);
		return value < 0 ? -1 / value : Infinity;
	}
	const most = Math.min(n, MOST_STEPS);
	const basis = new Float64Array((most + 1) * n);
	const work = new Float64Array(n);
	const diagonal = new Float64Array(most);
	const off = new Float64Array(most);
	let norm = 0;
	for (let i = 0; i < n; i++) norm += (basis[i] = 1 + ((i * 7919) % 101) / 101) ** 2; // no axis
	scaleRow(basis, 0, n, 1 / Math.sqrt(norm));
	let smallest = 0;
	for (let step = 0; step < most; step++) {
		const from = step * n;
		const to = from + n;
		applyScaled(inverse, direction, basis, from, to, work, n);
		diagonal[step] = dotRows(basis, from, to, n);
		for (let pass = 0; pass < 2; pass++)
			for (let other = 0; other <= from; other += n) {
				const along = dotRows(basis, other, to, n);
				for (let i = 0; i < n; i++)
					basis[to + i] = (basis[to + i] ?? 0) - along * (basis[other + i] ?? 0);
			}
		norm = Math.sqrt(dotRows(basis, to, to, n));
		const last = step + 1 === most;
		if (last || (step + 1) % STEPS_BETWEEN_LOOKS === 0 || norm < 1e-14) {
			smallest = smallestEigenvalue(diagonal, off, step + 1);
			if (step + 1 === n) break;
			const tail = norm * tailOfEigenvector(diagonal, off, step + 1, smallest);
			if (last || tail <= RELATIVE_PRECISION * Math.max(Math.abs(smallest), 1e-12)) {
				smallest -= tail;
				break;
			}
		}
		off[step] = norm;
		scaleRow(basis, to, n, 1 / norm);
	}
	return smallest < 0 ? -1 / smallest : Infinity;
}

function scaleRow(rows: Float64Array, at: number, n: number, factor: number): void {
	for (let i = at; i < at + n; i++) rows[i] = (rows[i] ?? 0) * factor;
}

function dotRows(rows: Float64Array, a: number, b: number, n: number): number {
	let sum = 0;
	for (let i = 0; i < n; i++) sum += (rows[a + i] ?? 0) * (rows[b + i] ?? 0);
	return sum;
}

/** Row `to` = L^-1 D L^-T times row `from`. */
function applyScaled(
	inverse: Float64Array,
	direction: Float64Array,
	rows: Float64Array,
	from: number,
	to: number,
	work: Float64Array,
	n: number
): void {
	work.fill(0);
	for (let i = 0; i < n; i++) {
		const value = rows[from + i] ?? 0;
		const row = i * n;
		for (let j = 0; j <= i; j++) work[j] = (work[j] ?? 0) + value * (inverse[row + j] ?? 0);
	}
	for (let i = 0; i < n; i++) {
		let sum = 0;
		for (let j = 0; j < n; j++) sum += (direction[i * n + j] ?? 0) * (work[j] ?? 0);
		rows[to + i] = sum;
	}
	for (let i = n - 1; i >= 0; i--) {
		let sum = 0;
		for (let j = 0; j <= i; j++) sum += (inverse[i * n + j] ?? 0) * (rows[to + j] ?? 0);
		rows[to + i] = sum;
	}
}

/** Below the smallest eigenvalue of a tridiagonal matrix by little: bisection on Sturm's count. */
function smallestEigenvalue(diagonal: Float64Array, off: Float64Array, count: number): number {
	let low = Infinity;
	let high = Infinity;
	for (let i = 0; i < count; i++) {
		const before = i > 0 ? Math.abs(off[i - 1] ?? 0) : 0;
		const after = i + 1 < count ? Math.abs(off[i] ?? 0) : 0;
		low = Math.min(low, (diagonal[i] ?? 0) - before - after);
		high = Math.min(high, diagonal[i] ?? 0);
	}
	while (high - low > BISECTION_PRECISION * (Math.abs(low) + Math.abs(high))) {
		const middle = low + (high - low) / 2;
		if (middle <= low || middle >= high) break;
		let pivot = 1;
		let below = false;
		for (let i = 0; i < count && !below; i++) {
			const side = i > 0 ? (off[i - 1] ?? 0) : 0;
			pivot = (diagonal[i] ?? 0) - middle - (side === 0 ? 0 : (side * side) / pivot);
			if (pivot < 0) below = true;
			else if (pivot === 0) pivot = Number.MIN_VALUE;
		}
		if (below) high = middle;
		else low = middle;
	}
	return low;
}
