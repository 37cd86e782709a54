/** Exact solution of square integer systems by p-adic lifting. */
import { integerRoot } from '../exact/coefficient';
import { ratio, type Rational } from '../exact/rational';

/** Entries [column, value] of each row. */
export type IntegerRows = readonly (readonly (readonly [column: number, value: number])[])[];

/** A prime below 2^26: products of two residues stay exact in doubles. */
const PRIME = 67_108_859;
const PRIME_BIG = BigInt(PRIME);
/** The inverse modulo the prime takes n^3 steps: some 3 s at this size. */
const SYSTEM_SIZE_LIMIT = 800;
/** Digits in base 2^26 of the solution that are tried: numbers of up to some 6,000 bits. */
const MOST_DIGITS = 512;

/**
 * Solves B x = b exactly, B square with small integer entries.
 * @returns null when B is singular modulo the prime, too large, or the solution too long.
 * @see Dixon, Exact solution of linear equations using p-adic expansions, Numer. Math. 40, 137 (1982)
 */
export function solveExactly(
	matrix: IntegerRows,
	rightSide: readonly bigint[],
	tick: () => void
): Rational[] | null {
	const n = matrix.length;
	if (n > SYSTEM_SIZE_LIMIT) return null;
	const inverse = invertModulo(matrix, tick);
	if (!inverse) return null;
	let residual = [...rightSide];
	let power = 1n;
	const sum = rightSide.map(() => 0n);
	for (let digits = 1; digits <= MOST_DIGITS; digits++) {
		tick();
		const digit = multiplyModulo(inverse, residual);
		residual = residual.map((r, i) => {
			const row = matrix[i] ?? [];
			const product = row.reduce((s, [c, v]) => s + BigInt(v) * BigInt(digit[c] ?? 0), 0n);
			return (r - product) / PRIME_BIG;
		});
		digit.forEach((d, i) => (sum[i] = (sum[i] ?? 0n) + BigInt(d) * power));
		power *= PRIME_BIG;
		if ((digits & (digits - 1)) !== 0 || digits < 4) continue;
		const solution = reconstruct(sum, power);
		if (solution && solves(matrix, solution, rightSide)) return solution;
	}
	return null;
}

/** Gauss-Jordan elimination; row-major. */
function invertModulo(matrix: IntegerRows, tick: () => void): Float64Array | null {
	const n = matrix.length;
	const width = 2 * n;
	const rows = matrix.map((entries, i) => {
		const row = new Float64Array(width);
		for (const [c, v] of entries) row[c] = ((v % PRIME) + PRIME) % PRIME;
		row[n + i] = 1;
		return row;
	});
	for (let k = 0; k < n; k++) {
		tick();
		const pivot = rows.findIndex((row, i) => i >= k && row[k] !== 0);
		const chosen = rows[pivot];
		const swapped = rows[k];
		if (!chosen || !swapped) return null;
		rows[pivot] = swapped;
		rows[k] = chosen;
		const scale = inverseModulo(chosen[k] ?? 0);
		for (let j = k; j < width; j++) chosen[j] = ((chosen[j] ?? 0) * scale) % PRIME;
		for (let i = 0; i < n; i++) {
			const row = rows[i];
			const factor = row?.[k] ?? 0;
			if (i === k || factor === 0 || !row) continue;
			const negative = PRIME - factor;
			for (let j = k; j < width; j++)
				row[j] = ((row[j] ?? 0) + negative * (chosen[j] ?? 0)) % PRIME;
		}
	}
	const inverse = new Float64Array(n * n);
	rows.forEach((row, i) => inverse.set(row.subarray(n), i * n));
	return inverse;
}

/** By Fermat: a^(p-2). */
function inverseModulo(a: number): number {
	let result = 1n;
	let base = BigInt(a);
	for (let e = PRIME - 2; e > 0; e = Math.floor(e / 2)) {
		if (e % 2 === 1) result = (result * base) % PRIME_BIG;
		base = (base * base) % PRIME_BIG;
	}
	return Number(result);
}

function multiplyModulo(inverse: Float64Array, vector: readonly bigint[]): Float64Array {
	const n = vector.length;
	const residues = Float64Array.from(vector, (v) =>
		Number(((v % PRIME_BIG) + PRIME_BIG) % PRIME_BIG)
	);
	const product = new Float64Array(n);
	for (let i = 0; i < n; i++) {
		let sum = 0;
		for (let j = 0; j < n; j++) {
			const [a, b] = [inverse[i * n + j] ?? 0, residues[j] ?? 0];
			sum = (sum + a * b) % PRIME;
		}
		product[i] = sum;
	}
	return product;
}

/** Fractions with numerator and denominator below sqrt(modulus / 2), or null. */
function reconstruct(values: readonly bigint[], modulus: bigint): Rational[] | null {
	const bound = integerRoot(modulus / 2n);
	const fractions: Rational[] = [];
	let common = 1n; // most entries share their denominators
	for (const value of values) {
		const scaled = (value * common) % modulus;
		const fraction = reconstructOne(scaled, modulus, bound);
		if (!fraction) return null;
		fractions.push(ratio(fraction[0], fraction[1] * common));
		common *= fraction[1];
		if (common > bound) return null;
	}
	return fractions;
}

/** Half of the extended Euclidean algorithm (Wang 1981). */
function reconstructOne(value: bigint, modulus: bigint, bound: bigint): [bigint, bigint] | null {
	let [r0, r1, t0, t1] = [modulus, value, 0n, 1n];
	while (r1 > bound) {
		const quotient = r0 / r1;
		[r0, r1] = [r1, r0 - quotient * r1];
		[t0, t1] = [t1, t0 - quotient * t1];
	}
	if (t1 === 0n || (t1 < 0n ? -t1 : t1) > bound) return null;
	return t1 < 0n ? [-r1, -t1] : [r1, t1];
}

function solves(matrix: IntegerRows, x: readonly Rational[], b: readonly bigint[]): boolean {
	const common = x.reduce((d, v) => d * ratio(v.d, d).n, 1n);
	const integers = x.map((v) => v.s * v.n * (common / v.d));
	return matrix.every((row, i) => {
		const sum = row.reduce((s, [c, v]) => s + BigInt(v) * (integers[c] ?? 0n), 0n);
		return sum === (b[i] ?? 0n) * common;
	});
}
