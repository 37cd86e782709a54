import { toDecimal, type Rational } from '../nonlocality/exact/rational';
import { finiteDecimal, showExact, withMinusSign } from './figures';

/** Digits of an end that does not end: as many as a double holds. */
const READING_PLACES = 16;
/** A printed value has at most this many digits behind the point, so its ends are finite. */
const MOST_PLACES = 640;

/** An end of a reading, exact where it is a finite decimal, otherwise rounded outward. */
export function readingEnd(end: Rational, side: 'lower' | 'upper'): string {
	return (
		finiteDecimal(end, MOST_PLACES) ??
		toDecimal(end, READING_PLACES, side === 'lower' ? 'down' : 'up')
	);
}

/** The sentence beside the field: how the printed value was read. */
export function readingText(
	low: Rational,
	high: Rational,
	exact: boolean,
	expression: string | null
): string {
	if (!exact)
		return withMinusSign(`Read as ${readingEnd(low, 'lower')} to ${readingEnd(high, 'upper')}`);
	if (expression === null) return withMinusSign(`Read as exactly ${showExact(low, 12)}`);
	const decimal = toDecimal(low, 12, low.s < 0n ? 'up' : 'down');
	return withMinusSign(`Read as exactly ${expression} = ${decimal}…`);
}
