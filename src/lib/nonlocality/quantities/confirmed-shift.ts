import { factorCholesky } from '../linalg/cholesky';

const UNIT_ROUNDOFF = 2 ** -53;
/**
 * Room for the rounding of a Cholesky factorisation, in roundoffs of the trace. Its a-priori bound
 * is about n of them; what is met in practice stays below 2 for any n.
 */
const ROOM = 12;
/** Past this many roundoffs of the trace the a-priori bound does as well. */
const MOST_ROOM = 400;
/** The factor is read as multiples of 2^-44 of the matrix's unit. */
const FACTOR_BITS = 44;

/**
 * A small whole t >= 0 with M + t >= 0, confirmed in whole numbers: M + t = L L^T + room + E for a
 * floating Cholesky factor L, and the Frobenius norm of E, summed exactly, is at most half the room.
 * About n^3 / 6 products of whole numbers, a fifth of a second for 244 rows.
 * @param entries lower triangle of M, row by row
 * @returns null where there is none below the a-priori bound
 */
export function confirmedShift(
	entries: readonly bigint[],
	n: number,
	poll: () => void
): bigint | null {
	const roundoffs = traceOf(entries, n) * UNIT_ROUNDOFF;
	const room = Math.ceil(ROOM * roundoffs);
	const factor = new Float64Array(n * n);
	for (let shift = 0; shift <= MOST_ROOM * roundoffs; shift = shift === 0 ? room : 2 * shift) {
		let at = 0;
		for (let i = 0; i < n; i++)
			for (let j = 0; j <= i; j++, at++)
				factor[i * n + j] = Number(entries[at] ?? 0n) + (i === j ? shift - room : 0);
		poll();
		if (!factorCholesky(factor, n)) continue;
		const confirmed = isNear(entries, n, BigInt(shift - room), factor, BigInt(room), poll);
		return confirmed ? BigInt(shift) : null;
	}
	return null;
}

function traceOf(entries: readonly bigint[], n: number): number {
	let trace = 0;
	for (let i = 0; i < n; i++) trace += Math.abs(Number(entries[(i * (i + 3)) / 2] ?? 0n));
	return trace;
}

/** |M + moved - L L^T| <= room / 2 in the Frobenius norm. */
function isNear(
	entries: readonly bigint[],
	n: number,
	moved: bigint,
	factor: Float64Array,
	room: bigint,
	poll: () => void
): boolean {
	const unit = BigInt(FACTOR_BITS);
	const rows = Array.from({ length: n }, (_, i) =>
		Array.from(factor.subarray(i * n, i * n + i + 1), (x) =>
			BigInt(Math.round(x * 2 ** FACTOR_BITS))
		)
	);
	let squares = 0n;
	let at = 0;
	for (const [i, left] of rows.entries()) {
		poll();
		for (let j = 0; j <= i; j++, at++) {
			const right = rows[j] ?? [];
			let rest = ((entries[at] ?? 0n) + (i === j ? moved : 0n)) << (2n * unit);
			for (let k = 0; k <= j; k++) rest -= (left[k] ?? 0n) * (right[k] ?? 0n);
			squares += (i === j ? 1n : 2n) * rest * rest;
		}
	}
	return 4n * squares <= (room << (2n * unit)) ** 2n;
}
