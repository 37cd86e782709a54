/** Proof that a real symmetric matrix is positive semidefinite, by floating-point arithmetic. */

const UNIT_ROUNDOFF = 2 ** -53;

/** Shifts may add at most this fraction to the trace, which the allowance below makes room for. */
const LARGEST_SHIFT = 0.02;

/** Rows of a lower triangle: row i has at least i + 1 entries. */
export type RealTriangle = readonly Float64Array[];

function traceOf(matrix: RealTriangle): number {
	return matrix.reduce((sum, row, i) => sum + Math.abs(row[i] ?? 0), 0);
}

/** One rounding of the trace. */
export function roundoffOf(matrix: RealTriangle): number {
	return UNIT_ROUNDOFF * traceOf(matrix);
}

/**
 * How far below zero an eigenvalue can be although a floating Cholesky factorisation completes:
 * gamma_{n+1} / (1 - gamma_{n+1}) * trace, with room for the rounding of this formula, of the
 * shifted diagonal (u times each entry) and for a slightly larger trace after the shift.
 * Rump, Verification of positive definiteness, BIT 46, 433 (2006).
 */
export function choleskyAllowance(matrix: RealTriangle): number {
	const gamma = ((matrix.length + 3) * UNIT_ROUNDOFF) / (1 - (matrix.length + 3) * UNIT_ROUNDOFF);
	return (1.05 * gamma * traceOf(matrix)) / (1 - gamma) + 1e-300;
}

/** Entry of an irregular matrix: no comparison with it holds, so that nothing is proved. */
const MISSING = NaN;

/** The Cholesky factor of matrix + moved * 1 as floating-point arithmetic finds it, or null. */
export function choleskyFactor(matrix: RealTriangle, moved: number): Float64Array[] | null {
	const factor: Float64Array[] = [];
	for (const [i, source] of matrix.entries()) {
		const row = new Float64Array(i + 1);
		factor.push(row);
		for (let j = 0; j <= i; j++) {
			const other = factor[j] ?? [];
			let rest = source[j] ?? MISSING;
			if (j === i) rest += moved;
			for (let k = 0; k < j; k++) rest -= (row[k] ?? MISSING) * (other[k] ?? MISSING);
			if (j < i) row[j] = rest / (other[j] ?? MISSING);
			else if (!(rest > 0) || rest === Infinity) return null;
			else row[i] = Math.sqrt(rest);
		}
	}
	return factor;
}

/**
 * True when lambda_min(matrix) >= -shift is proved, for exact doubles; an irregular matrix proves
 * nothing.
 */
export function provesPositive(matrix: RealTriangle, shift: number): boolean {
	if (!(shift >= 0) || !Number.isFinite(shift)) return false;
	if (shift * matrix.length > LARGEST_SHIFT * traceOf(matrix)) return false;
	const moved = shift * (1 - 4 * UNIT_ROUNDOFF) - choleskyAllowance(matrix);
	return choleskyFactor(matrix, moved) !== null;
}
