import { compareDigits, type DigitRun } from '../../ledger/digits';
import { withMinusSign } from '../../ledger/figures';
import type { Verdict } from '../../ledger/verdict';
import { knownSides, placesOf } from '../digits/shown-between';

export interface RecomputedShown {
	/** In front of a bound whose other side is not known. */
	readonly sign: '≤' | '≥' | null;
	readonly main: readonly DigitRun[];
	/** The other end of a range. */
	readonly to: readonly DigitRun[] | null;
	/** Quiet, after it: the full value, or a range `lower … upper` as its two ends. */
	readonly after: readonly string[];
}

const textOf = (runs: readonly DigitRun[]) => runs.map((run) => run.text).join('');
const quiet = (text: string): DigitRun[] => [{ text: withMinusSign(text), tone: 'quiet' }];
const only = (main: readonly DigitRun[], after: readonly string[] = []): RecomputedShown => ({
	sign: null,
	main,
	to: null,
	after: after.map(withMinusSign)
});

/** What stands in a table's cell beside a claim: the digits known, in one line where they suffice. */
export function recomputedShown(printed: string, verdict: Verdict): RecomputedShown | null {
	const { status, reading } = verdict;
	if (!verdict.enclosure) return null;
	const enclosure = {
		...verdict.enclosure,
		...knownSides(verdict.enclosure, placesOf(printed) + 1)
	};
	const digits = compareDigits({ printed, status, reading, enclosure });
	const known = digits.value;
	if (enclosure.exact !== null && known) return exactShown(printed, enclosure.exact, digits);
	const { rounded } = digits;
	if (rounded !== null) {
		const ends = [enclosure.lower, enclosure.upper].filter((end) => end !== null);
		const whole = known ? textOf(known) : '';
		if (whole === rounded) return only(bold(rounded));
		if (placesOf(whole) <= placesOf(rounded)) return only(bold(rounded), ends);
		// Where rounding changes no digit, one figure says both.
		return whole.startsWith(rounded)
			? only([...bold(rounded), ...quietRest(whole.slice(rounded.length))])
			: only(bold(rounded), [whole]);
	}
	if (known && textOf(known).length > textOf(digits.claimed).length) return only(known);
	const { lower, upper } = digits;
	if (lower && upper) {
		const plain = (runs: readonly DigitRun[]) =>
			status === 'agreement' ? quiet(textOf(runs)) : runs;
		return { ...only(plain(lower)), to: plain(upper) };
	}
	if (upper) return { ...only(upper), sign: '≤' };
	return lower ? { ...only(lower), sign: '≥' } : null;
}

const bold = (text: string): DigitRun[] => [{ text, tone: 'same' }];
const quietRest = (text: string): DigitRun[] => (text === '' ? [] : [{ text, tone: 'quiet' }]);

function exactShown(
	printed: string,
	exact: string,
	{ rounded, value, goesOn }: ReturnType<typeof compareDigits>
): RecomputedShown {
	const decimal = value ?? [];
	if (!exact.includes('/')) return only(rounded === null ? decimal : bold(rounded));
	const shown = textOf(decimal);
	const isCut = goesOn || shown.length > SHOWN_OF_FRACTION;
	const cut = isCut ? `${shown.slice(0, SHOWN_OF_FRACTION)}…` : shown;
	if (printed.trim() === exact) return only(bold(exact), [cut]);
	return rounded === null
		? only(isCut ? cutRuns(decimal) : decimal, [exact])
		: only(bold(rounded), [exact]);
}

/** Characters of a fraction's decimal: nine behind the point of a number below ten. */
const SHOWN_OF_FRACTION = 11;

function cutRuns(runs: readonly DigitRun[]): DigitRun[] {
	let left = SHOWN_OF_FRACTION;
	const kept = runs.flatMap(({ text, tone }): DigitRun[] => {
		const part = text.slice(0, left);
		left -= part.length;
		return part === '' ? [] : [{ text: part, tone }];
	});
	return [...kept, { text: '…', tone: 'quiet' }];
}
