/** Eigenvalues of real symmetric matrices. */

const MOST_SWEEPS = 60;

/**
 * Smallest eigenvalue of a symmetric tridiagonal matrix, from below, by bisection on the number of
 * negative pivots (Sturm's theorem).
 * @param diagonal `n` entries; @param offDiagonal `n - 1` entries; more are not looked at.
 * @param precision of the result, relative to the distances from 0 of the interval around it.
 */
export function smallestTridiagonalEigenvalue(
	diagonal: ArrayLike<number>,
	offDiagonal: ArrayLike<number>,
	n = diagonal.length,
	precision = 1e-15
): number {
	let low = Infinity;
	let high = Infinity;
	for (let i = 0; i < n; i++) {
		const before = i > 0 ? Math.abs(offDiagonal[i - 1] ?? 0) : 0;
		const after = i + 1 < n ? Math.abs(offDiagonal[i] ?? 0) : 0;
		low = Math.min(low, (diagonal[i] ?? 0) - before - after);
		high = Math.min(high, diagonal[i] ?? 0);
	}
	while (high - low > precision * (Math.abs(low) + Math.abs(high))) {
		const middle = low + (high - low) / 2;
		if (middle <= low || middle >= high) break;
		if (hasEigenvalueBelow(diagonal, offDiagonal, n, middle)) high = middle;
		else low = middle;
	}
	return low;
}

function hasEigenvalueBelow(
	diagonal: ArrayLike<number>,
	offDiagonal: ArrayLike<number>,
	n: number,
	shift: number
): boolean {
	let pivot = 1;
	for (let i = 0; i < n; i++) {
		const off = i > 0 ? (offDiagonal[i - 1] ?? 0) : 0;
		pivot = (diagonal[i] ?? 0) - shift - (off === 0 ? 0 : (off * off) / pivot);
		if (pivot < 0) return true;
		if (pivot === 0) pivot = Number.MIN_VALUE;
	}
	return false;
}

/**
 * Eigenvalues (ascending) and orthonormal eigenvectors of a symmetric row-major `n x n` matrix by
 * cyclic Jacobi rotations: slower than tridiagonalisation, but accurate to the last digits.
 * `vectors` holds eigenvector k in row k.
 */
export function symmetricEigen(
	matrix: Float64Array,
	n: number
): { values: Float64Array; vectors: Float64Array } {
	const a = matrix.slice(0, n * n);
	const v = new Float64Array(n * n);
	for (let i = 0; i < n; i++) v[i * n + i] = 1;
	for (let sweep = 0; sweep < MOST_SWEEPS; sweep++) {
		let off = 0;
		let all = 0;
		for (let i = 0; i < n; i++) {
			for (let j = 0; j < n; j++) {
				const square = (a[i * n + j] ?? 0) ** 2;
				all += square;
				if (i !== j) off += square;
			}
		}
		if (off <= 1e-32 * all) break;
		for (let p = 0; p < n - 1; p++) for (let q = p + 1; q < n; q++) rotate(a, v, n, p, q);
	}
	const order = Array.from({ length: n }, (_, i) => i).sort(
		(i, j) => (a[i * n + i] ?? 0) - (a[j * n + j] ?? 0)
	);
	const values = new Float64Array(n);
	const vectors = new Float64Array(n * n);
	order.forEach((from, to) => {
		values[to] = a[from * n + from] ?? 0;
		vectors.set(v.subarray(from * n, from * n + n), to * n);
	});
	return { values, vectors };
}

function rotate(a: Float64Array, v: Float64Array, n: number, p: number, q: number): void {
	const apq = a[p * n + q] ?? 0;
	if (apq === 0) return;
	const theta = ((a[q * n + q] ?? 0) - (a[p * n + p] ?? 0)) / (2 * apq);
	const t = (theta < 0 ? -1 : 1) / (Math.abs(theta) + Math.sqrt(theta * theta + 1));
	const c = 1 / Math.sqrt(t * t + 1);
	const s = t * c;
	for (let k = 0; k < n; k++) {
		const kp = a[k * n + p] ?? 0;
		const kq = a[k * n + q] ?? 0;
		a[k * n + p] = c * kp - s * kq;
		a[k * n + q] = s * kp + c * kq;
	}
	for (const target of [a, v]) {
		for (let k = 0; k < n; k++) {
			const pk = target[p * n + k] ?? 0;
			const qk = target[q * n + k] ?? 0;
			target[p * n + k] = c * pk - s * qk;
			target[q * n + k] = s * pk + c * qk;
		}
	}
}
