import type { Relation } from './claim';
import { plainText, sliceText, type PrintedText } from './printed-text';
import { StatedValueError } from './stated-value-error';

/** The number that was typed, without what stands around it. */
export interface NumberText {
	readonly number: PrintedText;
	/** What a sign in front of it says. */
	readonly relation?: Relation;
	/** `2.828...`: the digits go on. */
	readonly continues: boolean;
}

const SIGNS: Readonly<Record<string, Relation>> = {
	'=': '=',
	'~': '=',
	'≈': '=',
	'<': '<=',
	'>': '>='
};

/**
 * Finds the one number in what was typed: takes off a relation before it, the full stop or comma of
 * its sentence, braces around it and the dots of digits that go on.
 * @throws StatedValueError where there is none, or more than one.
 */
export function readNumberText(printed: string): NumberText {
	const whole = plainText(printed);
	refuseWhatIsNoNumber(whole);
	const sign = /^\s*([=~≈<>])/.exec(whole.text);
	const relation = sign?.[1] === undefined ? undefined : SIGNS[sign[1]];
	const ended = withoutPunctuation(trimmed(sliceText(whole, sign?.[0].length ?? 0)));
	refuseSeveral(ended);
	const unwrapped = withoutBraces(ended);
	const continues = unwrapped.text.endsWith('…');
	const number = withTimes(continues ? trimmed(sliceText(unwrapped, 0, -1)) : unwrapped);
	return relation ? { number, continues, relation } : { number, continues };
}

function trimmed(printed: PrintedText): PrintedText {
	const start = printed.text.search(/\S/);
	return start < 0 ? printed : sliceText(printed, start, printed.text.trimEnd().length);
}

/** The full stop or comma of the sentence it was copied from. */
function withoutPunctuation(printed: PrintedText): PrintedText {
	const end = printed.text.replace(/(?<=[\d)}%…])\s*[.,;]$/, '').length;
	return sliceText(printed, 0, end);
}

/** `{2.8284}`, as `\mathbf{2.8284}` leaves it. */
function withoutBraces(printed: PrintedText): PrintedText {
	const inside = /^\{[^{}]*\}$/.test(printed.text);
	return inside ? trimmed(sliceText(printed, 1, -1)) : printed;
}

/** `2.5 10^-4`: the space stands for a times sign. */
function withTimes(printed: PrintedText): PrintedText {
	const text = printed.text.replace(/(?<=\d)\s(?=\s*10\s*(?:\^|\*\*))/, '*');
	return { text, at: printed.at };
}

function fail(message: string, { at }: PrintedText, index: number): never {
	throw new StatedValueError(message, at[index] ?? at[0] ?? 0);
}

function refuseWhatIsNoNumber(whole: PrintedText): void {
	if (whole.text.trim() === '')
		throw new StatedValueError('Enter the value as the paper prints it, for instance 2.8284.', 0);
	const word = /\b(?:nan|inf(?:inity)?)\b/i.exec(whole.text);
	if (word)
		fail('A value must be a finite number; enter the number the paper prints.', whole, word.index);
}

/** A name, a unit, a second value or a range: which number counts is for the person to say. */
function refuseSeveral(number: PrintedText): void {
	const { text } = number;
	const sign = text.search(/[=≈<>]/);
	if (sign >= 0 && /\d/.test(text)) {
		const before = text.slice(0, sign);
		const named = /^[\\A-Za-z]/.test(before) && !/sqrt|frac|cos|sin|pi/.test(before);
		if (named) fail('Enter the number alone, without the name before it.', number, 0);
		fail('These are two values; enter one of them alone.', number, sign);
	}
	const comma = text.indexOf(',');
	if (comma >= 0)
		fail(
			'A comma can be read in two ways: write a decimal point, and leave thousands unseparated.',
			number,
			comma
		);
	const unit = /(?<=\d)\s*(?:bits?|nats?)$/i.exec(text);
	if (unit) fail('Enter the number alone, without its unit.', number, text.length - 1);
	const range = /^[-+]?\d+\.\d*\s*(-)\s*\d*\.\d+\s*%?$/.exec(text);
	if (range)
		fail(
			'This can be a range or a difference: write a range as 0.255(5) or 0.255 +- 0.005, a difference as its result.',
			number,
			text.indexOf('-', 1)
		);
	const twice = /^[-+]?[\d.]+\s*\([\d.]+\)\s*\([\d.]+\)/.exec(text);
	if (twice)
		fail(
			'Two uncertainties are given; enter the number with the total one.',
			number,
			text.lastIndexOf('(')
		);
}
