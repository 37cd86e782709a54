import { integerRoot, type Coefficient, type Factor } from '../nonlocality/exact/coefficient';
import { ONE, exactOfDouble, ratio, type Rational } from '../nonlocality/exact/rational';

export interface RationalInterval {
	readonly low: Rational;
	readonly high: Rational;
}

/** Square roots are enclosed to 2^-96, far inside the 1e-15 asked of an irrational value. */
const ROOT_BITS = 96n;

/** Pi to 38 decimals (cut off; the next ones are 71). */
const PI_SCALE = 10n ** 38n;
const PI_DIGITS = 314159265358979323846264338327950288419n;

function encloseFactor(factor: Factor): RationalInterval {
	if (factor.radicand !== null) {
		const root = integerRoot(factor.radicand << (2n * ROOT_BITS));
		const unit = 1n << ROOT_BITS;
		return { low: ratio(root, unit), high: ratio(root + 1n, unit) };
	}
	if (factor.text === 'pi')
		return { low: ratio(PI_DIGITS, PI_SCALE), high: ratio(PI_DIGITS + 1n, PI_SCALE) };
	const middle = exactOfDouble(factor.value);
	const error = exactOfDouble(factor.error);
	return { low: middle.sub(error), high: middle.add(error) };
}

function multiply(a: RationalInterval, b: RationalInterval): RationalInterval {
	const products = [a.low.mul(b.low), a.low.mul(b.high), a.high.mul(b.low), a.high.mul(b.high)];
	return products.reduce<RationalInterval>(
		({ low, high }, p) => ({
			low: p.compare(low) < 0 ? p : low,
			high: p.compare(high) > 0 ? p : high
		}),
		{ low: a.low.mul(b.low), high: a.low.mul(b.low) }
	);
}

/** Rationals on both sides of a coefficient; equal ones when it is exact. */
export function encloseCoefficient(coefficient: Coefficient): RationalInterval {
	let low = coefficient.rational;
	let high = coefficient.rational;
	for (const part of coefficient.parts) {
		const factors = part.factors.map(encloseFactor).reduce(multiply, { low: ONE, high: ONE });
		const term = multiply({ low: part.scale, high: part.scale }, factors);
		low = low.add(term.low);
		high = high.add(term.high);
	}
	return { low, high };
}
