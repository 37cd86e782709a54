import {
	equalCoefficients,
	exactCoefficient,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	realCoefficient,
	type Coefficient
} from '../exact/coefficient';
import { greatestCommonDivisor, overCommonDenominator } from '../exact/common-denominator';
import { ONE, ZERO, ratio, type Rational } from '../exact/rational';

/** Coefficients as integers: each is `scale` times its integer, up to 1e-12 when numerical. */
export interface IntegerForm {
	readonly integers: readonly bigint[];
	/** Positive: coefficient = scale * normalised. */
	readonly scale: Coefficient;
	/** The coefficients divided by the scale; equal to the integers unless numerical. */
	readonly normalised: readonly Coefficient[];
	/** True when the ratios are not rational: the integers are then 12 digits of them. */
	readonly numerical: boolean;
}

/** Irrational ratios are compared at 12 digits: doubles carry them to some 1e-15. */
const DIGITS = 1e12;

/**
 * Scales coefficients to integers without common divisor where their ratios are rational (also a
 * common irrational factor is taken out), else by the largest one. Not all may be zero.
 */
export function integerForm(coefficients: readonly Coefficient[]): IntegerForm {
	const reference = coefficients.find((c) => !isZero(c)) ?? exactCoefficient(ONE);
	const ratios: Rational[] = [];
	for (const coefficient of coefficients) {
		const quotient = reference.exact
			? (coefficient.exact?.div(reference.exact) ?? null)
			: symbolicRatio(coefficient, reference);
		if (!quotient) return numericalForm(coefficients);
		ratios.push(quotient);
	}
	const { integers: scaled, denominator } = overCommonDenominator(ratios);
	const divisor = scaled.reduce(greatestCommonDivisor, 0n);
	const sign = reference.value < 0 ? -1n : 1n;
	const integers = scaled.map((n) => (sign * n) / divisor);
	return {
		integers,
		scale: multiplyCoefficients(reference, exactCoefficient(ratio(sign * divisor, denominator))),
		normalised: integers.map((n) => exactCoefficient(ratio(n))),
		numerical: false
	};
}

/** a / b when that is a rational number by their symbolic forms, otherwise null. */
function symbolicRatio(a: Coefficient, b: Coefficient): Rational | null {
	if (isZero(a)) return ZERO;
	const key = (part: Coefficient['parts'][number]) => part.factors.map((f) => f.text).join('*');
	const first = b.parts[0];
	if (!first) return null;
	const match = a.parts.find((part) => key(part) === key(first));
	if (!match) return null;
	const quotient = match.scale.div(first.scale);
	return equalCoefficients(a, multiplyCoefficients(b, exactCoefficient(quotient)))
		? quotient
		: null;
}

function numericalForm(coefficients: readonly Coefficient[]): IntegerForm {
	const largest = coefficients.reduce((a, b) => (Math.abs(b.value) > Math.abs(a.value) ? b : a));
	const scale = largest.value < 0 ? negateCoefficient(largest) : largest;
	const normalised = coefficients.map((c) => divide(c, scale));
	return {
		integers: normalised.map((c) => BigInt(Math.round(c.value * DIGITS))),
		scale,
		normalised,
		numerical: true
	};
}

/** a / b for b > 0, with a bound on the error. */
export function divide(a: Coefficient, b: Coefficient): Coefficient {
	if (isZero(a)) return a;
	if (a.exact && b.exact) return exactCoefficient(a.exact.div(b.exact));
	const exact = symbolicRatio(a, b);
	if (exact) return exactCoefficient(exact);
	if (b.exact) return multiplyCoefficients(a, exactCoefficient(b.exact.inverse()));
	const value = a.value / b.value;
	const error =
		(a.error + Math.abs(value) * b.error) / (Math.abs(b.value) - b.error) +
		Math.abs(value) * 2 ** -52;
	return realCoefficient(value, error, `(${a.text})/(${b.text})`);
}
