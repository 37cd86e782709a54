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
