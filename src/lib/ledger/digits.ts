import { parseRational, toDecimal, type Rational } from '../nonlocality/exact/rational';
import type { VerdictStatus } from './claim';
import { readDecimalForm } from './decimal-form';
import { BOUND_PLACES, cutDecimal, sharedDigits, withMinusSign, type CutDecimal } from './figures';
import { plainText, sliceText } from './printed-text';
import type { Verdict } from './verdict';

/** Digits in one tone: agreeing, differing (underlined) or quiet. */
export interface DigitRun {
	readonly text: string;
	readonly tone: 'same' | 'differs' | 'quiet';
}

/** Claimed and recomputed digits, to stand under one another aligned on the decimal point. */
export interface DigitComparison {
	readonly claimed: readonly DigitRun[];
	readonly lower: readonly DigitRun[] | null;
	readonly upper: readonly DigitRun[] | null;
	/** The recomputed digits that are known: where it is exact, or both sides share them. */
	readonly value: readonly DigitRun[] | null;
	/** `value` is exact and has further digits: it was cut, never rounded. */
	readonly goesOn: boolean;
	/** In Agreement: the recomputed value rounded to the digits of the claim, when that is one. */
	readonly rounded: string | null;
}

export interface DigitInput {
	readonly printed: string;
	readonly status: VerdictStatus;
	readonly reading: Verdict['reading'];
	readonly enclosure: Verdict['enclosure'];
}

/** The claim's digits as a plain decimal: what the recomputed digits are compared with. */
interface ClaimDigits {
	readonly decimal: string;
	readonly places: number;
	/** Cut off rather than rounded: what it is compared with is cut off alike. */
	readonly truncated: boolean;
	/** The decimal is the printed text itself, so that it can be split into runs. */
	readonly asPrinted: boolean;
}

export function compareDigits(input: DigitInput): DigitComparison {
	const { printed, status, enclosure } = input;
	const shownPrinted = withMinusSign(printed.trim());
	const claim = claimDigits(input);
	const { digits: known, goesOn } = knownDigits(enclosure, claim?.places ?? 0);
	const whole = (tone: DigitRun['tone']): DigitRun[] => [{ text: shownPrinted, tone }];
	if (!enclosure || !claim) {
		return {
			claimed: whole(status === 'discrepancy' ? 'differs' : 'same'),
			lower: enclosure && quiet(enclosure.lower),
			upper: enclosure && quiet(enclosure.upper),
			value: quiet(known),
			goesOn,
			rounded: null
		};
	}
	const shared = status === 'discrepancy' ? sharedLength(claim, enclosure) : claim.decimal.length;
	const same = claim.decimal.slice(0, shared);
	// Where rounding changes a digit the full value follows the rounded one, all of it quiet.
	const rounded = status === 'agreement' ? roundedAlike(enclosure, claim) : null;
	const against = (text: string | null) => (text === null ? null : matchRuns(text, same));
	return {
		claimed:
			status === 'discrepancy'
				? claim.asPrinted
					? runs([same, 'same'], [claim.decimal.slice(shared), 'differs'])
					: whole('differs')
				: whole('same'),
		lower: against(enclosure.lower),
		upper: against(enclosure.upper),
		value: known?.startsWith(rounded ?? '') ? against(known) : quiet(known),
		goesOn,
		rounded: rounded === null ? null : withMinusSign(rounded)
	};
}

const runs = (
	...pieces: readonly (readonly [text: string, tone: DigitRun['tone']])[]
): DigitRun[] =>
	pieces
		.filter(([text]) => text !== '')
		.map(([text, tone]) => ({ text: withMinusSign(text), tone }));

const quiet = (text: string | null) => (text === null ? null : runs([text, 'quiet']));

function claimDigits({ printed, reading }: DigitInput): ClaimDigits | null {
	const plain = plainText(printed);
	const start = /^\s*[=~<>]?/.exec(plain.text)?.[0].length ?? 0;
	const number = sliceText(plain, start);
	const form = readForm(number);
	if (form) {
		const places = Math.max(0, form.precision);
		const decimal = toDecimal(form.value, places, 'nearest');
		const withSign = form.negative && !decimal.startsWith('-') ? `-${decimal}` : decimal;
		const asPrinted = number.text.replace(/\s/g, '') === withSign && start === 0;
		// An exact number is not rounded either: its digits stand as they are.
		const truncated =
			reading.exact || [reading.low, reading.high].some((end) => sameValue(end, form.value));
		return { decimal: withSign, places, truncated, asPrinted };
	}
	const known = sharedDigits(reading.low, reading.high);
	if (known === null) return null;
	const places = known.split('.')[1]?.length ?? 0;
	return { decimal: known, places, truncated: true, asPrinted: false };
}

function readForm(number: ReturnType<typeof plainText>) {
	try {
		return readDecimalForm(number);
	} catch {
		return null; // an exponent no verdict was ever derived for
	}
}

/** An exact value's digits come from the fraction itself, not from its ends rounded outward. */
function knownDigits(
	enclosure: Verdict['enclosure'],
	claimPlaces: number
): { readonly digits: string | null; readonly goesOn: boolean } {
	if (!enclosure) return NOTHING_KNOWN;
	const { lower, upper, exact } = enclosure;
	if (exact !== null) return exactDigits(exact, claimPlaces) ?? NOTHING_KNOWN;
	if (lower === null || upper === null) return NOTHING_KNOWN;
	return { digits: sharedDigits(lower, upper), goesOn: false };
}

const NOTHING_KNOWN = { digits: null, goesOn: false } as const;

function exactDigits(exact: string, claimPlaces: number): CutDecimal | null {
	const value = parseRational(exact);
	return value && cutDecimal(value, Math.max(BOUND_PLACES, claimPlaces + 1));
}

/** Leading digits that agree with `same`, then the rest. */
function matchRuns(text: string, same: string): DigitRun[] {
	let agreeing = 0;
	while (agreeing < same.length && text.charAt(agreeing) === same.charAt(agreeing)) agreeing++;
	return runs([text.slice(0, agreeing), 'same'], [text.slice(agreeing), 'quiet']);
}

function roundedAlike(
	{ lower, upper, exact }: NonNullable<Verdict['enclosure']>,
	claim: ClaimDigits
): string | null {
	const [low, high] = [toRational(exact ?? lower), toRational(exact ?? upper)];
	if (!low || !high) return null;
	const sides = [low, high].map((side) => toDecimal(side, claim.places, 'nearest'));
	return sides.every((side) => side === claim.decimal) ? claim.decimal : null;
}

const sameValue = (end: string, value: Rational) => toRational(end)?.equals(value) ?? false;

const toRational = (text: string | null): Rational | null =>
	text === null ? null : parseRational(text);

/**
 * How many characters of the claim's decimal are shared by some value of the enclosure rounded to
 * as many places.
 */
function sharedLength(
	{ decimal, places, truncated }: ClaimDigits,
	{ lower, upper }: NonNullable<Verdict['enclosure']>
): number {
	const negative = decimal.startsWith('-');
	// Mirrored for a negative claim, so that only sizes are compared.
	const [near, far] = negative ? [negated(upper), negated(lower)] : [lower, upper];
	const scaleUp = (text: string | null) => {
		const value = toRational(text);
		return (
			value && BigInt(toDecimal(value, places, truncated ? 'down' : 'nearest').replace('.', ''))
		);
	};
	const least = scaleUp(near);
	const most = scaleUp(far);
	if (most !== null && most < 0n) return 0;
	const from = least === null || least < 0n ? 0n : least;
	const digits = decimal.replace(/[-.]/g, '');
	let shared = 0;
	for (let count = 1; count <= digits.length; count++) {
		const below = digits.length - count;
		const start = BigInt(digits.slice(0, count)) * 10n ** BigInt(below);
		const end = start + 10n ** BigInt(below) - 1n;
		if (end < from || (most !== null && start > most)) break;
		shared = count;
	}
	// A discrepancy shows somewhere: at the latest in the last digit printed.
	return charactersFor(decimal, Math.min(shared, digits.length - 1));
}

const negated = (text: string | null) =>
	text === null ? null : text.startsWith('-') ? text.slice(1) : `-${text}`;

/** The length of the decimal up to and with its n-th digit (a sign or a point alone shows nothing). */
function charactersFor(decimal: string, digits: number): number {
	if (digits === 0) return 0;
	let seen = 0;
	for (let i = 0; i < decimal.length; i++) {
		if (/\d/.test(decimal.charAt(i)) && ++seen === digits)
			return decimal.charAt(i + 1) === '.' ? i + 2 : i + 1;
	}
	return decimal.length;
}
