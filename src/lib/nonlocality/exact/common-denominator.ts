import { ratio, type Rational } from './rational';

/** Rationals over one denominator: value_i = integers_i / denominator. */
export interface CommonFractions {
	readonly integers: readonly bigint[];
	readonly denominator: bigint;
}

/** Not negative; 0 only for two zeros. */
export function greatestCommonDivisor(a: bigint, b: bigint): bigint {
	while (b !== 0n) [a, b] = [b, a % b];
	return a < 0n ? -a : a;
}

export function overCommonDenominator(values: readonly Rational[]): CommonFractions {
	let denominator = 1n;
	for (const value of values)
		if (denominator % value.d !== 0n) denominator *= ratio(value.d, denominator).n;
	return { integers: values.map((v) => v.s * v.n * (denominator / v.d)), denominator };
}

/**
 * The fraction of smallest denominator within `tolerance` of a double (continued fractions), or
 * null beyond the largest denominator.
 * @example nearbyFraction(0.3333333333, 1e-9, 100n) // 1/3
 */
export function nearbyFraction(
	value: number,
	tolerance: number,
	largestDenominator: bigint
): Rational | null {
	let [p0, q0, p1, q1] = [0n, 1n, 1n, 0n];
	let rest = value;
	for (let step = 0; step < 64; step++) {
		if (!Number.isFinite(rest)) return null;
		const whole = Math.floor(rest);
		[p0, q0, p1, q1] = [p1, q1, BigInt(whole) * p1 + p0, BigInt(whole) * q1 + q0];
		if (q1 > largestDenominator) return null;
		if (Math.abs(Number(p1) / Number(q1) - value) <= tolerance) return ratio(p1, q1);
		rest = 1 / (rest - whole);
	}
	return null;
}
