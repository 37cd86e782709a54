import { parseCoefficient } from '../nonlocality/exact/expression';
import { NotationError } from '../nonlocality/exact/notation-error';
import { ratio, type Rational } from '../nonlocality/exact/rational';
import type { ReadingChoice, Relation } from './claim';
import { ExponentTooLarge, readDecimalForm, type DecimalForm } from './decimal-form';
import { encloseCoefficient } from './enclose-coefficient';
import { plainText, sliceText, type PrintedText } from './printed-text';
import { readingText } from './reading-text';

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

/** A value that can't be read: where, and what to do. */
export class StatedValueError extends Error {
	constructor(
		message: string,
		/** Zero-based position in what was typed. */
		readonly position: number
	) {
		super(message);
		this.name = 'StatedValueError';
	}
}

/** Longest printed value; nothing past it is looked at. */
export const LONGEST_PRINTED = 200;

const SIGNS: Readonly<Record<string, Relation>> = { '=': '=', '~': '=', '<': '<=', '>': '>=' };

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
	const whole = plainText(printed);
	refuseWhatIsNoNumber(whole);
	const { relation, number } = splitRelation(whole);
	const decimal = decimalOf(number);
	const parts = decimal ? readDigits(decimal, reading) : readExpression(printed, number, reading);
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
		choice: reading,
		decimal,
		text
	};
	return relation ? { ...read, relation } : read;
}

function refuseWhatIsNoNumber({ text, at }: PrintedText): void {
	if (text.trim() === '')
		throw new StatedValueError('Enter the value as the paper prints it, for instance 2.8284.', 0);
	const word = /\b(?:nan|inf(?:inity)?)\b/i.exec(text);
	if (word)
		throw new StatedValueError(
			'A value must be a finite number; enter the number the paper prints.',
			at[word.index] ?? 0
		);
	const comma = text.indexOf(',');
	if (comma >= 0)
		throw new StatedValueError(
			'A comma can be read in two ways: write a decimal point, and leave thousands unseparated.',
			at[comma] ?? 0
		);
}

function splitRelation(whole: PrintedText): { relation?: Relation; number: PrintedText } {
	const sign = /^\s*([=~<>])/.exec(whole.text);
	const relation = sign?.[1] === undefined ? undefined : SIGNS[sign[1]];
	const rest = sliceText(whole, sign?.[0].length ?? 0);
	// The full stop of the sentence it was copied from.
	const number = sliceText(rest, 0, rest.text.replace(/(?<=[\d)}%])\.?\s*$/, '').length);
	return relation ? { relation, number } : { number };
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
	for (const gap of typed.matchAll(/(?<=[\d.])\s+(?=[\d.])/g))
		for (let i = 0; i < gap[0].length; i++) gaps.add(start + gap.index + i);
	if (gaps.size === 0) return text;
	const kept = text.at.filter((position) => !gaps.has(position));
	return { text: kept.map((position) => printed.charAt(position)).join(''), at: kept };
}

function sentence(message: string): string {
	const whole = `The value can't be read: ${message}`;
	return /[.!?]$/.test(whole) ? whole : `${whole}.`;
}
