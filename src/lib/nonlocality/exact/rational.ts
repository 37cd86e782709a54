import Fraction from 'fraction.js';

/** An exact rational number: a BigInt numerator over a BigInt denominator, always reduced. */
export type Rational = Fraction;

export const ZERO: Rational = new Fraction(0n);
export const ONE: Rational = new Fraction(1n);

/** The rational `numerator / denominator`. @throws RangeError when the denominator is zero. */
export function ratio(numerator: bigint, denominator: bigint = 1n): Rational {
	if (denominator === 0n) throw new RangeError('a fraction needs a denominator other than zero');
	return new Fraction(numerator, denominator);
}

const DECIMAL =
	/^([+-]?)(\d+)(?:\.(\d*))?(?:[eE]([+-]?\d{1,4}))?$|^([+-]?)\.(\d+)(?:[eE]([+-]?\d{1,4}))?$/;

/**
 * Reads an integer, decimal (optionally with an exponent) or fraction `p/q` exactly.
 * @returns null when the text is none of these; never rounds.
 * @example parseRational('0.1') // 1/10
 */
export function parseRational(text: string): Rational | null {
	const trimmed = text.trim();
	const [numerator = '', denominator, more] = trimmed.split('/', 3);
	if (denominator !== undefined) {
		const above = parseRational(numerator);
		const below = more === undefined ? parseRational(denominator) : null;
		if (!above || !below || below.n === 0n) return null;
		return above.div(below);
	}
	const match = DECIMAL.exec(trimmed);
	if (!match) return null;
	const negative = (match[1] ?? match[5]) === '-';
	const whole = match[2] ?? '0';
	const decimals = match[3] ?? match[6] ?? '';
	const shift = Number(match[4] ?? match[7] ?? '0') - decimals.length;
	const digits = BigInt(whole + decimals) * (negative ? -1n : 1n);
	return shift >= 0 ? ratio(digits * 10n ** BigInt(shift)) : ratio(digits, 10n ** BigInt(-shift));
}

/** The decimal of a JSON number's shortest form: 0.1 is 1/10. @throws RangeError when not finite. */
export function rationalOfNumber(value: number): Rational {
	const read = Number.isFinite(value) ? parseRational(String(value)) : null;
	if (!read) throw new RangeError(`${value} is not a finite number`);
	return read;
}

/** The exact dyadic rational that a double is. @throws RangeError when not finite. */
export function exactOfDouble(value: number): Rational {
	if (!Number.isFinite(value)) throw new RangeError(`${value} is not a finite number`);
	if (value === 0) return ZERO;
	const bits = new DataView(new ArrayBuffer(8));
	bits.setFloat64(0, value);
	const high = bits.getUint32(0);
	const exponent = (high >>> 20) & 0x7ff;
	const fraction = (BigInt(high & 0xfffff) << 32n) | BigInt(bits.getUint32(4));
	const mantissa = exponent === 0 ? fraction : fraction | (1n << 52n);
	const power = (exponent === 0 ? 1 : exponent) - 1075;
	const signed = value < 0 ? -mantissa : mantissa;
	return power >= 0 ? ratio(signed << BigInt(power)) : ratio(signed, 1n << BigInt(-power));
}

/** Signed numerator (fraction.js keeps the sign apart). */
export function numeratorOf(value: Rational): bigint {
	return value.s * value.n;
}

/**
 * The double nearest to a rational: correctly rounded in the normal range, infinite past it; below
 * it within one unit in the last place.
 */
export function toDouble(value: Rational): number {
	const scaled = value.n === 0n ? 0 : divideToDouble(value.n, value.d);
	return value.s < 0n ? -scaled : scaled;
}

function divideToDouble(numerator: bigint, denominator: bigint): number {
	// The division of two doubles is correctly rounded.
	if (numerator <= LARGEST_SAFE && denominator <= LARGEST_SAFE)
		return Number(numerator) / Number(denominator);
	const bits = (x: bigint) => x.toString(2).length;
	const shift = 64 - (bits(numerator) - bits(denominator));
	const above = shift >= 0 ? numerator << BigInt(shift) : numerator;
	const below = shift >= 0 ? denominator : denominator << BigInt(-shift);
	// 64 bits, the last one set when anything was cut off: Number() then rounds correctly.
	const quotient = (above / below) | (above % below === 0n ? 0n : 1n);
	const half = Math.trunc(shift / 2); // in two steps: 2 ** -shift alone may overflow
	return Number(quotient) * 2 ** -half * 2 ** -(shift - half);
}

/** True only when the rational is a double (small denominators; a quick test, not a complete one). */
export function isExactDouble(value: Rational): boolean {
	return value.n <= LARGEST_SAFE && value.d <= LARGEST_SAFE && (value.d & (value.d - 1n)) === 0n;
}

const LARGEST_SAFE = BigInt(Number.MAX_SAFE_INTEGER);

/** The largest double that is not above a rational (-Infinity below all of them). */
export function toDoubleDown(value: Rational): number {
	let near = toDouble(value);
	if (near === -Infinity) return near;
	if (near === Infinity) near = Number.MAX_VALUE;
	while (exactOfDouble(near).compare(value) > 0) near = nextDouble(near, -1);
	return near;
}

/** The smallest double that is not below a rational. */
export function toDoubleUp(value: Rational): number {
	return 0 - toDoubleDown(value.neg()); // 0, never -0
}

/** The neighbouring double in the given direction (+1 or -1). */
export function nextDouble(value: number, direction: 1 | -1): number {
	if (!Number.isFinite(value)) return value;
	if (value === 0) return direction * Number.MIN_VALUE;
	const bits = new DataView(new ArrayBuffer(8));
	bits.setFloat64(0, value);
	const step = value > 0 === direction > 0 ? 1n : -1n;
	bits.setBigInt64(0, bits.getBigInt64(0) + step);
	return bits.getFloat64(0);
}

/** `p/q`, or `p` for an integer. */
export function printRational(value: Rational): string {
	return value.d === 1n ? String(numeratorOf(value)) : `${numeratorOf(value)}/${value.d}`;
}

/**
 * The decimal with `places` digits behind the point, rounded in the given direction
 * (`down` towards minus infinity, `up` towards plus infinity, `nearest` half away from zero).
 */
export function toDecimal(
	value: Rational,
	places: number,
	direction: 'down' | 'up' | 'nearest'
): string {
	const scale = 10n ** BigInt(places);
	const numerator = numeratorOf(value) * scale;
	let whole = numerator / value.d;
	const rest = numerator - whole * value.d;
	if (direction === 'nearest') {
		const twice = 2n * (rest < 0n ? -rest : rest);
		if (twice >= value.d) whole += numerator < 0n ? -1n : 1n;
	} else if (rest !== 0n) {
		if (direction === 'down' && numerator < 0n) whole -= 1n;
		if (direction === 'up' && numerator > 0n) whole += 1n;
	}
	const digits = String(whole < 0n ? -whole : whole).padStart(places + 1, '0');
	const sign = whole < 0n ? '-' : '';
	if (places === 0) return sign + digits;
	return `${sign}${digits.slice(0, -places)}.${digits.slice(-places)}`;
}
