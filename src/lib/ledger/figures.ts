import {
	exactOfDouble,
	parseRational,
	toDecimal,
	type Rational
} from '../nonlocality/exact/rational';

/** Digits behind the point of a bound whose other side is not known. */
export const BOUND_PLACES = 9;
/** Doubles carry 15 to 17 digits; a decimal of 15 reads back to itself. */
const MOST_DIGITS = 15;
/** Digits shown past the place where the two sides of an enclosure part. */
const DIGITS_PAST_GAP = 1;

export type Side = 'lower' | 'upper';

/** A double is the exact rational it stores; a string is a decimal or a fraction. */
export function rationalOf(value: number | string | Rational): Rational {
	if (typeof value === 'number') return exactOfDouble(value);
	if (typeof value !== 'string') return value;
	const read = parseRational(value);
	if (!read) throw new RangeError(`${value} is not a decimal or a fraction`);
	return read;
}

/** The decimal of a rational when it ends within `places` digits, without trailing zeros. */
export function finiteDecimal(value: Rational, places: number): string | null {
	let { d } = value;
	let needed = 0;
	for (; d !== 1n && needed <= places; needed++) {
		d = d % 10n === 0n ? d / 10n : d % 2n === 0n ? d / 2n : d % 5n === 0n ? d / 5n : 0n;
		if (d === 0n) return null;
	}
	return needed <= places ? toDecimal(value, needed, 'nearest') : null;
}

/** The places, at most `places`, that keep a decimal within what a double reads back exactly. */
function placesFor(value: Rational, places: number): number {
	const whole = value.abs().floor().n.toString().length;
	return Math.max(0, Math.min(places, MOST_DIGITS - whole));
}

/**
 * A bound as a decimal string, rounded outward: a lower one down, an upper one up, so that what is
 * shown is never tighter than what is stored. A bound that ends sooner is shown whole.
 */
export function showBound(
	value: number | string | Rational,
	side: Side,
	digits: number = BOUND_PLACES
): string {
	const bound = rationalOf(value);
	const whole = finiteDecimal(bound, digits);
	return whole ?? toDecimal(bound, digits, side === 'lower' ? 'down' : 'up');
}

/** Places at which a gap has its first digit: 0.00009 has it in the fifth. */
export function placesOfGap(gap: Rational): number {
	if (gap.n === 0n) return MOST_DIGITS;
	// gap = n/d: compare lengths instead of taking a logarithm of numbers a double can't hold.
	let places = gap.d.toString().length - gap.n.toString().length;
	if (gap.mul(powerOfTen(places)).compare(1) < 0) places += 1;
	return places;
}

function powerOfTen(places: number): Rational {
	return rationalOf(`1e${places}`);
}

export interface ShownEnclosure {
	readonly lower: string | null;
	readonly upper: string | null;
	/** Leading digits both sides share, when there is at least one behind the point. */
	readonly value: string | null;
}

/**
 * Both sides with the digits that are known: one more than the place where they part.
 * `extra` asks for further digits of the bounds themselves.
 */
export function showEnclosure(
	lower: number | string | Rational | null,
	upper: number | string | Rational | null,
	extra = 0
): ShownEnclosure {
	const below = lower === null ? null : rationalOf(lower);
	const above = upper === null ? null : rationalOf(upper);
	const places = enclosurePlaces(below, above, extra);
	const low = below && showBound(below, 'lower', placesFor(below, places));
	const high = above && showBound(above, 'upper', placesFor(above, places));
	return { lower: low, upper: high, value: low && high ? sharedDigits(low, high) : null };
}

function enclosurePlaces(lower: Rational | null, upper: Rational | null, extra: number): number {
	if (!lower || !upper) return BOUND_PLACES;
	const gap = upper.sub(lower).abs();
	return Math.max(2, Math.min(MOST_DIGITS, placesOfGap(gap) + DIGITS_PAST_GAP + extra));
}

/** The digits two decimals have in common, up to where they part; null when none is behind the point. */
export function sharedDigits(a: string, b: string): string | null {
	if (a === b) return a;
	let shared = 0;
	while (shared < a.length && a.charAt(shared) === b.charAt(shared)) shared++;
	const known = a.slice(0, shared);
	return /\.\d/.test(known) ? known : null;
}

export interface CutDecimal {
	readonly digits: string;
	/** Further digits follow. */
	readonly goesOn: boolean;
}

/** The first digits of an exact value, cut and not rounded: every one of them is a digit of it. */
export function cutDecimal(exact: string | Rational, places: number): CutDecimal {
	const value = rationalOf(exact);
	const whole = finiteDecimal(value, places);
	if (whole !== null) return { digits: whole, goesOn: false };
	const size = toDecimal(value.abs(), places, 'down');
	return { digits: value.s < 0n ? `-${size}` : size, goesOn: true };
}

/** A fraction with its decimal: `4/3 = 1.333333333...`; an integer or short decimal as it is. */
export function showExact(exact: string | Rational, places: number = BOUND_PLACES): string {
	const value = rationalOf(exact);
	const { digits, goesOn } = cutDecimal(value, places);
	if (!goesOn) return digits;
	return `${typeof exact === 'string' ? exact : value.toFraction()} = ${digits}…`;
}

/** For reading: a true minus sign instead of a hyphen in front of a digit or between spaces. */
export function withMinusSign(text: string): string {
	return text.replace(/(?<!\de)-(?=[\d.])|(?<= )-(?= )/g, '\u2212');
}
