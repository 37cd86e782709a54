import { ONE, ZERO, printRational, toDouble, type Rational } from './rational';

/**
 * A coefficient of a functional: an exact rational where it was written as one, otherwise a real
 * carried as a double with a bound on its absolute error.
 */
export interface Coefficient {
	/** The exact value, or null for an irrational (or merely numerical) one. */
	readonly exact: Rational | null;
	/** The nearest double known. */
	readonly value: number;
	/** |true value - value| is at most this. */
	readonly error: number;
	/** As it is written in a problem: `-1/2`, `sqrt(2)`. Reading it back gives this coefficient. */
	readonly text: string;
}

const UNIT_ROUNDOFF = 2 ** -53;

export function exactCoefficient(exact: Rational): Coefficient {
	const value = toDouble(exact);
	return { exact, value, error: Math.abs(value) * UNIT_ROUNDOFF, text: printRational(exact) };
}

/** A real coefficient; `error` is an absolute bound and `text` an expression that reads back to it. */
export function realCoefficient(value: number, error: number, text: string): Coefficient {
	return { exact: null, value, error, text };
}

export const COEFFICIENT_ZERO: Coefficient = exactCoefficient(ZERO);
export const COEFFICIENT_ONE: Coefficient = exactCoefficient(ONE);

export function isZero(a: Coefficient): boolean {
	return a.exact ? a.exact.n === 0n : a.value === 0 && a.error === 0;
}

export function addCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	if (a.exact && b.exact) return exactCoefficient(a.exact.add(b.exact));
	if (isZero(a)) return b;
	if (isZero(b)) return a;
	const value = a.value + b.value;
	const error = a.error + b.error + Math.abs(value) * UNIT_ROUNDOFF;
	return realCoefficient(value, error, `(${a.text})+(${b.text})`);
}

export function multiplyCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	if (a.exact && b.exact) return exactCoefficient(a.exact.mul(b.exact));
	if (isZero(a) || isZero(b)) return COEFFICIENT_ZERO;
	if (a.exact?.equals(1)) return b;
	if (b.exact?.equals(1)) return a;
	const value = a.value * b.value;
	const error =
		Math.abs(a.value) * b.error +
		Math.abs(b.value) * a.error +
		a.error * b.error +
		Math.abs(value) * UNIT_ROUNDOFF;
	return realCoefficient(value, error, `(${a.text})*(${b.text})`);
}

export function negateCoefficient(a: Coefficient): Coefficient {
	if (a.exact) return exactCoefficient(a.exact.neg());
	return realCoefficient(-a.value, a.error, `-(${a.text})`);
}
