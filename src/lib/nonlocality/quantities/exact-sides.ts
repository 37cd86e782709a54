import {
	printRational,
	toDouble,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import type { Outcome } from './outcome';

/**
 * What a maximum whose two sides were found in exact arithmetic is: `exact` where they meet and
 * nothing is allowed for irrational coefficients, else an enclosure rounded outward.
 * @param allowance how far the true value may be outside the sides
 */
export function outcomeOfSides(
	below: Rational,
	above: Rational,
	allowance: Rational
): Omit<Outcome, 'method' | 'certificate'> {
	const exact = allowance.n === 0n && below.equals(above) ? printRational(below) : null;
	const lower = toDoubleDown(below.sub(allowance));
	const upper = toDoubleUp(above.add(allowance));
	return {
		lower,
		upper,
		value: exact === null ? (lower + upper) / 2 : toDouble(below),
		tolerance: exact === null ? upper - lower : null,
		optimum: null,
		guaranteed: { lower: true, upper: true },
		exact
	};
}
