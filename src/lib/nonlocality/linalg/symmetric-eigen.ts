/** Eigenvalues of real symmetric matrices. */

const MOST_SWEEPS = 60;

const MOST_LAGUERRE_STEPS = 60;

/**
 * Smallest eigenvalue of a symmetric tridiagonal matrix by Laguerre's method, which approaches it
 * monotonically from below and converges cubically (Parlett, The Symmetric Eigenvalue Problem,
 * ch. 3; derivatives of the determinant from those of the pivots).
 * @param diagonal `n` entries; @param offDiagonal `n - 1` entries; more are not looked at.
 * @param precision where to stop: length of a step relative to the spectrum's bound
 */
export function smallestTridiagonalEigenvalue(
	diagonal: ArrayLike<number>,
	offDiagonal: ArrayLike<number>,
	n = diagonal.length,
	precision = 1e-15
): number {
	let low = Infinity;
	let size = 0;
	for (let i = 0; i < n; i++) {
		const before = i > 0 ? Math.abs(offDiagonal[i - 1] ?? 0) : 0;
		const after = i + 1 < n ? Math.abs(offDiagonal[i] ?? 0) : 0;
		low = Math.min(low, (diagonal[i] ?? 0) - before - after);
		size = Math.max(size, Math.abs(diagonal[i] ?? 0) + before + after);
	}
	for (let step = 0; step < MOST_LAGUERRE_STEPS; step++) {
		const length = laguerreStep(diagonal, offDiagonal, n, low);
		if (!(length > 0)) break;
		low += length;
		if (length <= precision * size) break;
	}
	return low;
}

/** From `x` below all eigenvalues; 0 when a pivot says that it is not below them. */
function laguerreStep(
	diagonal: ArrayLike<number>,
	offDiagonal: ArrayLike<number>,
	n: number,
	x: number
): number {
	let first = 0; // p'/p
	let second = 0; // -(p'/p)'
	let inverse = 0; // 1 / pivot
	let u = 0; // pivot' / pivot
	let v = 0; // pivot'' / pivot
	for (let i = 0; i < n; i++) {
		const off = i > 0 ? (offDiagonal[i - 1] ?? 0) : 0;
		const ratio = off * off * inverse;
		const pivot = (diagonal[i] ?? 0) - x - ratio;
		if (!(pivot > 0)) return 0;
		inverse = 1 / pivot;
		v = ratio * (v - 2 * u * u) * inverse;
		u = (ratio * u - 1) * inverse;
		first += u;
		second += u * u - v;
	}
	const root = Math.sqrt(Math.max(0, (n - 1) * (n * second - first * first)));
	return n / (root - first);
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
