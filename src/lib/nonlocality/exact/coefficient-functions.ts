import {
	COEFFICIENT_ONE,
	COEFFICIENT_ZERO,
	addCoefficients,
	coefficientOfParts,
	exactCoefficient,
	isZero,
	multiplyCoefficients,
	negateCoefficient,
	rootOfInteger,
	type Coefficient,
	type Factor
} from './coefficient';
import { NotationError } from './notation-error';
import { ONE, ZERO, numeratorOf, ratio, type Rational } from './rational';

/** Past these, a short text would make an enormous number, or take a long time. */
export const LARGEST_EXPONENT = 200;
export const LARGEST_BITS = 1_100;
const LARGEST_PARTS = 16;
const LARGEST_FACTORS = 8;

const UNIT_ROUNDOFF = 2 ** -53;

const ofFactor = (factor: Factor) => coefficientOfParts(ZERO, [{ scale: ONE, factors: [factor] }]);

const opaque = (text: string, value: number, error: number): Coefficient => {
	if (!Number.isFinite(value) || !Number.isFinite(error))
		throw new NotationError(`${text} is not a finite number`);
	return ofFactor({ text, value, error, radicand: null });
};

/** Pi: |pi - Math.PI| < 1.3e-16. */
export const PI: Coefficient = opaque('pi', Math.PI, 1.3e-16);

/** @throws NotationError when b is zero or can't be told from zero. */
export function divideCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	return multiplyCoefficients(a, inverseOf(b));
}

function inverseOf(b: Coefficient): Coefficient {
	if (isZero(b)) throw new NotationError('division by zero');
	if (b.exact) return exactCoefficient(b.exact.inverse());
	const part = b.parts.length === 1 ? b.parts[0] : undefined;
	const root = part?.factors.length === 1 ? part.factors[0]?.radicand : null;
	if (part && root) {
		// 1 / (p + q sqrt(m)) = (p - q sqrt(m)) / (p^2 - q^2 m); never zero, m being no square.
		const norm = b.rational.mul(b.rational).sub(part.scale.mul(part.scale).mul(ratio(root)));
		const conjugate = [{ ...part, scale: part.scale.neg().div(norm) }];
		return coefficientOfParts(b.rational.div(norm), conjugate);
	}
	if (part && b.rational.n === 0n && (part.factors.length > 1 || !part.scale.equals(1))) {
		// Factor by factor, the rational scale outside, so that equal numbers have equal texts.
		return part.factors.reduce(
			(product, factor) => multiplyCoefficients(product, inverseOf(ofFactor(factor))),
			exactCoefficient(part.scale.inverse())
		);
	}
	const size = Math.abs(b.value);
	if (size <= 2 * b.error) throw new NotationError(`${b.text} can't be told from zero`);
	const value = 1 / b.value;
	const error = b.error / (size * (size - b.error)) + Math.abs(value) * UNIT_ROUNDOFF;
	return opaque(`(1/(${b.text}))`, value, error);
}

/**
 * a to an integer or half-integer power.
 * @throws NotationError for any other exponent, and for a result past LARGEST_BITS.
 */
export function powerOfCoefficient(a: Coefficient, exponent: Coefficient): Coefficient {
	const twice = exponent.exact?.mul(2);
	if (!twice || twice.d !== 1n) throw new NotationError('an exponent must be an integer');
	const steps = Number(numeratorOf(twice));
	if (Math.abs(steps) > 2 * LARGEST_EXPONENT)
		throw new NotationError(`an exponent must be at most ${LARGEST_EXPONENT}`);
	const base = steps % 2 === 0 ? a : squareRoot(a);
	const count = steps % 2 === 0 ? steps / 2 : steps;
	let result = COEFFICIENT_ONE;
	let square = base; // base^(2^i)
	for (let rest = Math.abs(count); rest > 0; rest >>= 1) {
		if (rest & 1) result = checkedProduct(result, square);
		if (rest > 1) square = checkedProduct(square, square);
	}
	return count < 0 ? inverseOf(result) : result;
}

function checkedProduct(a: Coefficient, b: Coefficient): Coefficient {
	const product = multiplyCoefficients(a, b);
	checkSize(product);
	return product;
}

/** @throws NotationError when a number has become too long to go on with. */
export function checkSize(a: Coefficient): void {
	const bits = (x: bigint) => x.toString(16).length * 4;
	const tooLong = (x: Rational) => bits(x.n) > LARGEST_BITS || bits(x.d) > LARGEST_BITS;
	if (tooLong(a.rational) || a.parts.some((part) => tooLong(part.scale)))
		throw new NotationError('the number has too many digits');
	if (a.parts.length > LARGEST_PARTS || a.parts.some((p) => p.factors.length > LARGEST_FACTORS))
		throw new NotationError('the number has too many irrational parts');
}

/** Exact for the square of a rational. @throws NotationError for a negative number. */
export function squareRoot(a: Coefficient): Coefficient {
	if (isZero(a)) return COEFFICIENT_ZERO;
	if (a.value < 0) throw new NotationError(`the square root of a negative number, ${a.text}`);
	if (a.exact) {
		// sqrt(p/q) = sqrt(p q) / q
		const { outside, factor } = rootOfInteger(a.exact.n * a.exact.d);
		const scale = ratio(outside, a.exact.d);
		return factor
			? coefficientOfParts(ZERO, [{ scale, factors: [factor] }])
			: exactCoefficient(scale);
	}
	if (a.value <= 2 * a.error)
		throw new NotationError(`the square root of ${a.text}, which can't be told from zero`);
	const value = Math.sqrt(a.value);
	// sqrt(x + e) - sqrt(x) <= e / sqrt(x - e), and the root is correctly rounded.
	const error = a.error / Math.sqrt(a.value - a.error) + value * UNIT_ROUNDOFF;
	return opaque(`sqrt(${a.text})`, value, error);
}

/** Exact at multiples of pi/6 and pi/4. */
export function cosine(a: Coefficient): Coefficient {
	if (isZero(a)) return COEFFICIENT_ONE;
	const turns = multipleOfPi(a);
	if (turns) return cosineOfPi(turns);
	return opaque(`cos(${a.text})`, Math.cos(a.value), a.error + 2 ** -51);
}

/** sin(x) = cos(pi/2 - x). */
export function sine(a: Coefficient): Coefficient {
	if (isZero(a)) return COEFFICIENT_ZERO;
	const turns = multipleOfPi(a);
	if (turns) return cosineOfPi(ratio(1n, 2n).sub(turns));
	return opaque(`sin(${a.text})`, Math.sin(a.value), a.error + 2 ** -51);
}

function multipleOfPi(a: Coefficient): Rational | null {
	const [part, second] = a.parts;
	const isPi = part?.factors.length === 1 && part.factors[0]?.text === 'pi';
	return isPi && !second && a.rational.n === 0n ? part.scale : null;
}

/** cos(r pi), brought into (0, 1/2) so that equal numbers have equal texts. */
function cosineOfPi(r: Rational): Coefficient {
	let turns = r.sub(r.div(2).floor().mul(2)); // modulo 2
	if (turns.compare(1) > 0) turns = ratio(2n).sub(turns);
	if (turns.compare(0.5) > 0) return negateCoefficient(cosineOfPi(ONE.sub(turns)));
	if (turns.n === 0n) return COEFFICIENT_ONE;
	if (turns.equals(0.5)) return COEFFICIENT_ZERO;
	if (turns.equals(ratio(1n, 3n))) return exactCoefficient(ratio(1n, 2n));
	if (turns.equals(ratio(1n, 4n))) return squareRoot(exactCoefficient(ratio(1n, 2n)));
	if (turns.equals(ratio(1n, 6n))) return squareRoot(exactCoefficient(ratio(3n, 4n)));
	const angle = multiplyCoefficients(exactCoefficient(turns), PI);
	// |cos'| <= 1, and Math.cos is within one unit in the last place in every engine we run on.
	return opaque(`cos(${angle.text})`, Math.cos(angle.value), angle.error + 2 ** -52);
}

export function subtractCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	return addCoefficients(a, negateCoefficient(b));
}
