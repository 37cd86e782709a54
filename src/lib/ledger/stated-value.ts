import { parseCoefficient } from '../nonlocality/exact/expression';
import { NotationError } from '../nonlocality/exact/notation-error';
import { ratio, type Rational } from '../nonlocality/exact/rational';
import type { ReadingChoice, Relation } from './claim';
import { ExponentTooLarge, readDecimalForm, type DecimalForm } from './decimal-form';
import { encloseCoefficient } from './enclose-coefficient';
import { readNumberText } from './number-text';
import type { PrintedText } from './printed-text';
import { readingText } from './reading-text';
import { StatedValueError } from './stated-value-error';

export { StatedValueError } from './stated-value-error';

/** A printed value, kept as printed and read as an interval. */
export interface StatedValue {
	readonly printed: string;
	/** Ends of the interval it stands for. */
	readonly low: Rational;
	readonly high: Rational;
	/** The printed number itself (the middle of the enclosure of an irrational one). */
	readonly value: Rational;
	/** Read as one number, not as a rounded one. */
	readonly exact: boolean;
	/** Exact but irrational: low and high enclose it to 1e-15 of its size or closer. */
	readonly irrational: boolean;
	/** What a sign in front of the number says: `~ 2.8`, `< 3`. */
	readonly relation?: Relation;
	/** Digits of the value behind the point (percent and exponent counted in); null without digits. */
	readonly precision: number | null;
	readonly percent: boolean;
	/** The choice it was read by. */
	readonly choice: ReadingChoice;
	/** The number as digits, for telling slips of the pen; null for a fraction or an expression. */
	readonly decimal: DecimalForm | null;
	/** `Read as 2.82835 to 2.82845`. */
	readonly text: string;
}

/** Longest printed value; nothing past it is looked at. */
export const LONGEST_PRINTED = 200;

const HALF = ratio(1n, 2n);

/**
 * Reads a value as a paper prints it.
 * @throws StatedValueError with the position of what can't be read and what to do about it.
 * @example readStatedValue('2.8284', 'as-printed').text // Read as 2.82835 to 2.82845
 */
export function readStatedValue(printed: string, reading: ReadingChoice): StatedValue {
	if (printed.length > LONGEST_PRINTED)
		throw new StatedValueError(
			`A printed value has at most ${LONGEST_PRINTED} characters; enter the number alone.`,
			LONGEST_PRINTED
		);
	const { relation, number, continues } = readNumberText(printed);
	const decimal = decimalOf(number);
	if (continues && !decimal)
		throw new StatedValueError(
			'Dots may follow digits only; enter an exact expression without them.',
			number.at[0] ?? 0
		);
	// Digits that go on were cut off, not rounded.
	const choice = continues && reading === 'as-printed' ? 'truncated' : reading;
	const parts = decimal ? readDigits(decimal, choice) : readExpression(printed, number, choice);
	const { low, high, exact, irrational, value, percent } = parts;
	const text = readingText(low, high, exact, irrational ? typedPart(printed, number) : null);
	const precision = decimal ? decimal.precision : null;
	const read = {
		printed,
		low,
		high,
		value,
		exact,
		irrational,
		precision,
		percent,
		choice,
		decimal,
		text
	};
	return relation ? { ...read, relation } : read;
}

function decimalOf(number: PrintedText): DecimalForm | null {
	try {
		return readDecimalForm(number);
	} catch (error) {
		if (error instanceof ExponentTooLarge)
			throw new StatedValueError(sentence(error.message), number.at[0] ?? 0);
		throw error;
	}
}

/**
 * The relation of a claim: a sign in front of its value decides where nothing but `=` is said, and
 * `~ 2.8` goes with any. Null: the two contradict each other.
 */
export function claimedRelation(
	{ relation: sign }: Pick<StatedValue, 'relation'>,
	given: Relation
): Relation | null {
	if (!sign || sign === '=' || sign === given) return given;
	return given === '=' ? sign : null;
}

type Interval = Pick<StatedValue, 'low' | 'high' | 'exact' | 'irrational' | 'value' | 'percent'>;

function readDigits(decimal: DecimalForm, reading: ReadingChoice): Interval {
	const { value, unit, uncertainty, percent } = decimal;
	const interval = (below: Rational, above: Rational, exact = false): Interval => ({
		low: value.sub(below),
		high: value.add(above),
		exact,
		irrational: false,
		value,
		percent
	});
	const none = ratio(0n);
	const half = unit.mul(HALF);
	switch (reading) {
		case 'exact':
			return interval(none, none, true);
		case 'truncated': // away from zero lies what was cut off
			return decimal.negative ? interval(unit, none) : interval(none, unit);
		case 'rounded':
			return interval(half, half);
		case 'as-printed':
			if (uncertainty) return interval(uncertainty, uncertainty);
			return decimal.bareInteger ? interval(none, none, true) : interval(half, half);
	}
}

/** A fraction or an expression is exact: nothing in it is a rounded digit. */
function readExpression(printed: string, number: PrintedText, reading: ReadingChoice): Interval {
	const start = number.at[0] ?? 0;
	if (reading === 'rounded' || reading === 'truncated')
		throw new StatedValueError(
			`A fraction or an expression has no last digit to be ${reading}; choose "as printed" or "exact".`,
			start
		);
	const percent = number.text.trimEnd().endsWith('%');
	const source = expressionSource(printed, number);
	try {
		const { low, high } = encloseCoefficient(parseCoefficient(source.text));
		const scale = percent ? ratio(1n, 100n) : ratio(1n);
		const value = low.add(high).mul(HALF);
		return {
			low: low.mul(scale),
			high: high.mul(scale),
			value: value.mul(scale),
			exact: true,
			irrational: !low.equals(high),
			percent
		};
	} catch (error) {
		if (!(error instanceof NotationError)) throw error;
		const position = error.position === null ? start : (source.at[error.position] ?? start);
		const advice =
			error.suggestion ?? 'Enter a number such as 2.8284, 1/3, 2*sqrt(2), 82.8 % or 0.25088(2).';
		throw new StatedValueError(`${sentence(error.message)} ${advice}`, position);
	}
}

/** What was typed of the number, without a relation in front of it. */
function typedPart(printed: string, number: PrintedText): string {
	return printed.slice(number.at[0] ?? 0, (number.at.at(-1) ?? printed.length) + 1).trim();
}

/** The expression as typed, without percent sign and without the spaces between digits. */
function expressionSource(printed: string, number: PrintedText): PrintedText {
	const start = number.at[0] ?? 0;
	const last = number.at.at(-1) ?? start;
	const typed = printed.slice(start, last + 1).replace(/\\?[%％]\s*$/, '');
	const text = { text: typed, at: Array.from(typed, (_, i) => start + i) };
	const gaps = new Set<number>();
	for (const gap of typed.matchAll(/(?<=[\d.])\s+(?=[\d.])/g)) {
		refuseMixedNumber(typed, gap.index, gap[0].length, start);
		for (let i = 0; i < gap[0].length; i++) gaps.add(start + gap.index + i);
	}
	if (gaps.size === 0) return text;
	const kept = text.at.filter((position) => !gaps.has(position));
	return { text: kept.map((position) => printed.charAt(position)).join(''), at: kept };
}

/** `1 000/3` is a thousand by three; `2 2/3` may be a mixed number, and is not guessed. */
function refuseMixedNumber(typed: string, gap: number, length: number, start: number): void {
	const grouped = /^\d{3}(?![\d.])/.test(typed.slice(gap + length));
	const behindPoint = /\.\d+(?:\s\d+)*$/.test(typed.slice(0, gap));
	if (grouped || behindPoint) return;
	throw new StatedValueError(
		'A space here can be read in two ways: write a mixed number as one fraction, a product with *.',
		start + gap
	);
}

function sentence(message: string): string {
	const whole = `The value can't be read: ${message}`;
	return /[.!?]$/.test(whole) ? whole : `${whole}.`;
}
