import {
	ONE,
	ZERO,
	isExactDouble,
	printRational,
	ratio,
	toDouble,
	type Rational
} from './rational';

/** One irrational number: `sqrt(2)`, `pi`, `cos(1/5*pi)`, or an opaque `(...)`. */
export interface Factor {
	readonly text: string;
	readonly value: number;
	/** |true value - value| is at most this. */
	readonly error: number;
	/** m for `sqrt(m)`, m a positive integer that is no square; products of such roots are merged. */
	readonly radicand: bigint | null;
}

/** scale * (product of the factors); at least one factor, sorted by their text. */
export interface IrrationalPart {
	readonly scale: Rational;
	readonly factors: readonly Factor[];
}

/**
 * A coefficient of a functional: `rational` + the sum of `parts`. Without parts it is an exact
 * rational; otherwise a real with a bound on the absolute error of its double. Sums and products
 * stay symbolic, so that sqrt(2) - sqrt(2) is exactly zero and sqrt(8) is 2 sqrt(2).
 */
export interface Coefficient {
	/** The exact value, or null for an irrational (or merely numerical) one. */
	readonly exact: Rational | null;
	/** The nearest double known. */
	readonly value: number;
	/** |true value - value| is at most this. */
	readonly error: number;
	/** As it is written in a problem: `-1/2`, `2*sqrt(2)`. Reading it back gives this coefficient. */
	readonly text: string;
	readonly rational: Rational;
	/** Sorted by the text of their factors, no two alike. */
	readonly parts: readonly IrrationalPart[];
}

const UNIT_ROUNDOFF = 2 ** -53;

export function exactCoefficient(exact: Rational): Coefficient {
	const value = toDouble(exact);
	const error = isExactDouble(exact)
		? 0
		: Math.max(Math.abs(value) * UNIT_ROUNDOFF, Number.MIN_VALUE);
	return { exact, value, error, text: printRational(exact), rational: exact, parts: [] };
}

/** A real coefficient; `error` is an absolute bound and `text` an expression that reads back to it. */
export function realCoefficient(value: number, error: number, text: string): Coefficient {
	const factor = { text: `(${text})`, value, error, radicand: null };
	return coefficientOfParts(ZERO, [{ scale: ONE, factors: [factor] }]);
}

const partKey = (factors: readonly Factor[]) => factors.map((factor) => factor.text).join('*');

/** Merges like parts, drops zeros, and bounds the error of the double. */
export function coefficientOfParts(
	rational: Rational,
	parts: Iterable<IrrationalPart>
): Coefficient {
	const merged = new Map<string, IrrationalPart>();
	for (const part of parts) {
		const key = partKey(part.factors);
		const before = merged.get(key)?.scale ?? ZERO;
		merged.set(key, { scale: before.add(part.scale), factors: part.factors });
	}
	const kept = [...merged].filter(([, part]) => part.scale.n !== 0n);
	if (kept.length === 0) return exactCoefficient(rational);
	kept.sort(([a], [b]) => (a < b ? -1 : 1));

	let { value, error } = exactCoefficient(rational);
	let text = rational.n === 0n ? '' : printRational(rational);
	for (const [key, part] of kept) {
		const term = valueOfPart(part);
		value += term.value;
		error += term.error + Math.abs(value) * UNIT_ROUNDOFF;
		text += printPart(part.scale, key, text === '');
	}
	return { exact: null, value, error, text, rational, parts: kept.map(([, part]) => part) };
}

function valueOfPart(part: IrrationalPart): { value: number; error: number } {
	let { value, error } = exactCoefficient(part.scale);
	for (const factor of part.factors) {
		const next = value * factor.value;
		error =
			Math.abs(value) * factor.error +
			Math.abs(factor.value) * error +
			error * factor.error +
			Math.abs(next) * UNIT_ROUNDOFF;
		value = next;
	}
	return { value, error };
}

function printPart(scale: Rational, key: string, first: boolean): string {
	const size = scale.abs();
	const sign = scale.s < 0n ? '-' : first ? '' : '+';
	return sign + (size.equals(1) ? key : `${printRational(size)}*${key}`);
}

export const COEFFICIENT_ZERO: Coefficient = exactCoefficient(ZERO);
export const COEFFICIENT_ONE: Coefficient = exactCoefficient(ONE);

export function isZero(a: Coefficient): boolean {
	return a.exact ? a.exact.n === 0n : a.value === 0 && a.error === 0;
}

export function addCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	if (isZero(a)) return b;
	if (isZero(b)) return a;
	if (a.exact && b.exact) return exactCoefficient(a.exact.add(b.exact));
	return coefficientOfParts(a.rational.add(b.rational), [...a.parts, ...b.parts]);
}

export function multiplyCoefficients(a: Coefficient, b: Coefficient): Coefficient {
	if (a.exact && b.exact) return exactCoefficient(a.exact.mul(b.exact));
	let rational = a.rational.mul(b.rational);
	const parts: IrrationalPart[] = [];
	for (const part of a.parts) parts.push({ ...part, scale: part.scale.mul(b.rational) });
	for (const part of b.parts) parts.push({ ...part, scale: part.scale.mul(a.rational) });
	for (const left of a.parts) {
		for (const right of b.parts) {
			const product = multiplyParts(left, right);
			if (product.factors.length > 0) parts.push(product);
			else rational = rational.add(product.scale);
		}
	}
	return coefficientOfParts(rational, parts);
}

/** The product of two parts, its square roots of integers merged; factors may come out empty. */
function multiplyParts(a: IrrationalPart, b: IrrationalPart): IrrationalPart {
	let scale = a.scale.mul(b.scale);
	let radicand = 1n;
	const factors: Factor[] = [];
	for (const factor of [...a.factors, ...b.factors]) {
		if (factor.radicand === null) {
			factors.push(factor);
			continue;
		}
		const shared = greatestCommonDivisor(radicand, factor.radicand);
		radicand = (radicand / shared) * (factor.radicand / shared);
		scale = scale.mul(ratio(shared));
	}
	const root = rootOfInteger(radicand);
	scale = scale.mul(ratio(root.outside));
	if (root.factor) factors.push(root.factor);
	factors.sort((x, y) => (x.text < y.text ? -1 : 1));
	return { scale, factors };
}

export function negateCoefficient(a: Coefficient): Coefficient {
	return multiplyCoefficients(a, MINUS_ONE);
}

const MINUS_ONE = exactCoefficient(ONE.neg());

/** True when the two are known to be the same number: their symbolic forms agree. */
export function equalCoefficients(a: Coefficient, b: Coefficient): boolean {
	return isZero(addCoefficients(a, negateCoefficient(b)));
}

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
	while (b !== 0n) [a, b] = [b, a % b];
	return a;
}

/** Largest trial divisor when squares are taken out of a radicand. */
const LARGEST_TRIAL_DIVISOR = 1_000n;

/** sqrt(m) = outside * factor for an integer m >= 1; `factor` is null when m is a perfect square. */
export function rootOfInteger(m: bigint): { outside: bigint; factor: Factor | null } {
	let outside = 1n;
	for (let p = 2n; p <= LARGEST_TRIAL_DIVISOR && p * p <= m; p++) {
		while (m % (p * p) === 0n) {
			m /= p * p;
			outside *= p;
		}
	}
	const whole = integerRoot(m);
	if (whole * whole === m) return { outside: outside * whole, factor: null };
	const value = Math.sqrt(Number(m));
	// Number(m) and the root are each correctly rounded: 2^-54 + 2^-53 relative.
	const error = value * 2 ** -52;
	return { outside, factor: { text: `sqrt(${m})`, value, error, radicand: m } };
}

/** The largest integer whose square is at most m >= 0 (Newton). */
export function integerRoot(m: bigint): bigint {
	if (m < 2n) return m;
	let x = 1n << BigInt(Math.ceil(m.toString(2).length / 2));
	for (;;) {
		const next = (x + m / x) >> 1n;
		if (next >= x) return x;
		x = next;
	}
}
