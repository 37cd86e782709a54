import { ZERO, parseRational, ratio, type Rational } from '../nonlocality/exact/rational';
import { withoutCharacters, type PrintedText } from './printed-text';

/** A number printed in digits: decimal, exponent, percent, with or without an uncertainty. */
export interface DecimalForm {
	readonly value: Rational;
	/** What one step of the last printed digit is worth. */
	readonly unit: Rational;
	/** Digits of the value behind the point (percent and exponent counted in; may be negative). */
	readonly precision: number;
	readonly negative: boolean;
	readonly percent: boolean;
	/** Digits alone: no point, exponent, percent or uncertainty. */
	readonly bareInteger: boolean;
	readonly uncertainty: Rational | null;
	/** Positions, in what was typed, of the digits of the number itself. */
	readonly digitsAt: readonly number[];
}

/** Beyond this a double overflows or an expression of it does. */
const LARGEST_EXPONENT = 300;

const UNSIGNED = String.raw`\d+(?:\.\d*)?|\.\d+`;
const EXPONENT = String.raw`[eEdD]([+-]?\d+)|(?:[*xX])10(?:\^|\*\*)(?:\{([+-]?\d+)\}|\(([+-]?\d+)\)|([+-]?\d+))`;
const NUMBER = String.raw`(?<sign>[+-]?)(?<digits>${UNSIGNED})`;

const scaled = (name: string) => `(?<${name}>${EXPONENT})?`;
const FORMS = [
	new RegExp(`^${NUMBER}(?:\\((?<last>${UNSIGNED})\\))?${scaled('exponent')}(?<percent>%)?$`),
	new RegExp(
		`^${NUMBER}${scaled('exponent')}%?±(?<plusMinus>${UNSIGNED})${scaled('ownExponent')}(?<percent>%)?$`
	),
	new RegExp(`^\\(${NUMBER}±(?<plusMinus>${UNSIGNED})\\)${scaled('exponent')}(?<percent>%)?$`)
];

/** Thrown for an exponent past what the product computes with. */
export class ExponentTooLarge extends Error {}

function powerOfTen(exponent: number): Rational {
	return exponent >= 0 ? ratio(10n ** BigInt(exponent)) : ratio(1n, 10n ** BigInt(-exponent));
}

function readExponent(text: string | undefined): number {
	if (!text) return 0;
	const digits = /([+-]?\d+)[)}]?$/.exec(text)?.[1] ?? '0';
	const exponent = Number(digits);
	if (Math.abs(exponent) > LARGEST_EXPONENT)
		throw new ExponentTooLarge(
			`an exponent beyond ${LARGEST_EXPONENT} cannot be computed with; write the value with a smaller one`
		);
	return exponent;
}

function placesOf(digits: string): number {
	const point = digits.indexOf('.');
	return point < 0 ? 0 : digits.length - point - 1;
}

const read = (digits: string): Rational => parseRational(digits) ?? ZERO;

/**
 * Reads a number printed in digits.
 * @returns null when the text has another form (a fraction, an expression, no number at all).
 * @throws ExponentTooLarge
 */
export function readDecimalForm(printed: PrintedText): DecimalForm | null {
	const compact = withoutCharacters(printed, /[\s~]/);
	const groups = FORMS.map((form) => form.exec(compact.text)?.groups).find((found) => found);
	if (!groups) return null;
	const digits = groups['digits'] ?? '';
	const percent = groups['percent'] !== undefined;
	const negative = groups['sign'] === '-';
	const exponent = readExponent(groups['exponent']) - (percent ? 2 : 0);
	const scale = powerOfTen(exponent);
	const magnitude = read(digits).mul(scale);
	const unit = powerOfTen(exponent - placesOf(digits));
	return {
		value: negative ? magnitude.neg() : magnitude,
		unit,
		precision: placesOf(digits) - exponent,
		negative,
		percent,
		bareInteger: /^\d+$/.test(digits) && /^[+-]?\d+$/.test(compact.text),
		uncertainty: readUncertainty(groups, scale, unit, percent),
		digitsAt: digitPositions(compact, digits)
	};
}

function readUncertainty(
	groups: Readonly<Record<string, string | undefined>>,
	scale: Rational,
	unit: Rational,
	percent: boolean
): Rational | null {
	const { last, plusMinus, ownExponent } = groups;
	// 0.25088(2): units of the last digit; 12.3(1.4): its own point says what it is worth.
	if (last !== undefined) return read(last).mul(last.includes('.') ? scale : unit);
	if (plusMinus === undefined) return null;
	// Inside brackets the exponent behind them counts for both; otherwise each has its own.
	if (!('ownExponent' in groups)) return read(plusMinus).mul(scale);
	return read(plusMinus).mul(powerOfTen(readExponent(ownExponent) - (percent ? 2 : 0)));
}

function digitPositions(compact: PrintedText, digits: string): number[] {
	const start = compact.text.indexOf(digits);
	const positions: number[] = [];
	for (let i = 0; i < digits.length; i++) {
		if (digits.charAt(i) !== '.') positions.push(compact.at[start + i] ?? 0);
	}
	return positions;
}
