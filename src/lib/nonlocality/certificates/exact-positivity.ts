/** Proof that a symmetric matrix of whole numbers is positive semidefinite, in whole numbers alone. */
import { choleskyAllowance, choleskyFactor, roundoffOf } from './verified-cholesky';

/** Rows of the lower triangle: row i has i + 1 entries. */
export type IntegerTriangle = readonly (readonly bigint[])[];

/** The proposed factor keeps this many bits behind the point of the matrix's own unit. */
const FACTOR_BITS = 44;
/** Factorisations are hardly ever off by more roundoffs of the trace; their bound is about n. */
const USUAL_ROUNDOFFS = 6;
/** Products of 64-bit words past which the elimination is not begun: about two seconds. */
const MOST_ELIMINATION_WORK = 2e9;

/**
 * How matrix >= 0 was proved; null when it was not. First by a factor that floating-point
 * arithmetic proposes and whole numbers confirm; where the matrix is too near to singular for
 * that, by exact elimination while that is cheap.
 */
export function provePositivity(matrix: IntegerTriangle): 'factor' | 'elimination' | null {
	const rows = matrix.map((row) => Float64Array.from(row, Number));
	const allowance = choleskyAllowance(rows);
	for (const margin of [USUAL_ROUNDOFFS * roundoffOf(rows), allowance]) {
		const proposed = choleskyFactor(rows, -margin);
		if (proposed && confirmsFactor(matrix, proposed, margin)) return 'factor';
	}
	// What is not even nearly positive needs no elimination to be refused.
	if (!choleskyFactor(rows, 4 * allowance)) return null;
	if (eliminationWork(matrix) > MOST_ELIMINATION_WORK) return null;
	return eliminatesPositive(matrix) ? 'elimination' : null;
}

/**
 * True when matrix > 0 follows from a proposed lower triangle L, whatever it is:
 * matrix = L L^T + margin * 1 + E with the Frobenius norm of E at most the margin. L and the margin
 * are read as multiples of 2^-FACTOR_BITS, so every sum is exact. About n^3 / 6 products.
 */
function confirmsFactor(
	matrix: IntegerTriangle,
	proposed: readonly Float64Array[],
	expected: number
): boolean {
	const unit = 2 ** FACTOR_BITS;
	const factor = proposed.map((row) => Array.from(row, (x) => BigInt(Math.round(x * unit))));
	const margin = BigInt(Math.floor(expected * unit)) << BigInt(FACTOR_BITS);
	const most = margin * margin;
	let squares = 0n;
	for (const [i, row] of matrix.entries()) {
		const left = factor[i] ?? [];
		for (const [j, entry] of row.entries()) {
			const right = factor[j] ?? [];
			let rest = entry << BigInt(2 * FACTOR_BITS);
			for (let k = 0; k <= j; k++) rest -= (left[k] ?? 0n) * (right[k] ?? 0n);
			if (i === j) rest -= margin;
			squares += i === j ? rest * rest : 2n * rest * rest;
		}
		if (squares > most) return false;
	}
	return true;
}

function bitLength(value: bigint): number {
	return value === 0n ? 0 : (value < 0n ? -value : value).toString(16).length * 4;
}

/** The k-th elimination works on minors of order k, of up to k (bits + log2 n / 2) bits. */
function eliminationWork(matrix: IntegerTriangle): number {
	const n = matrix.length;
	const bits = matrix.reduce((most, row) => Math.max(most, ...row.map(bitLength)), 1);
	const words = 1 + ((n / 2) * (bits + Math.log2(n) / 2)) / 64;
	return (n ** 3 / 2) * words ** 2;
}

/**
 * True exactly when the matrix is positive semidefinite: L D L^T without fractions. Every entry met
 * is a minor of the matrix, so that the division is exact; a pivot 0 needs a column of zeros.
 * Bareiss, Math. Comp. 22, 565 (1968).
 */
export function eliminatesPositive(matrix: IntegerTriangle): boolean {
	const rows = matrix.map((row) => [...row]);
	let before = 1n;
	for (const [k, row] of rows.entries()) {
		const pivot = row[k] ?? 0n;
		const below = rows.slice(k + 1);
		if (pivot < 0n) return false;
		if (pivot === 0n) {
			if (below.some((other) => other[k] !== 0n)) return false;
			continue;
		}
		for (const [at, other] of below.entries()) {
			const factor = other[k] ?? 0n;
			for (let j = k + 1; j <= k + 1 + at; j++) {
				const entry = (other[j] ?? 0n) * pivot - factor * (rows[j]?.[k] ?? 0n);
				other[j] = entry / before;
			}
		}
		before = pivot;
	}
	return true;
}
