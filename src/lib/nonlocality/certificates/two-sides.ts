import {
	parseRational,
	printRational,
	toDoubleDown,
	toDoubleUp,
	type Rational
} from '../exact/rational';
import type { CheckOutcome } from './types';

/** What a check found of a maximum, in rationals. */
export interface TwoSides {
	readonly below: Rational;
	/** Null where proving it would take too long here. */
	readonly above: Rational | null;
	/** How far irrational coefficients may be from the rationals that stand for them. */
	readonly allowance: Rational;
	/** Whether every coefficient is rational, so that the sides are those of the functional itself. */
	readonly rational: boolean;
}

/** Compares the value that a certificate states, if any, with the proved sides; rounds outward. */
export function outcomeOfTwoSides(
	stated: string | null,
	{ below, above, allowance, rational }: TwoSides,
	method: string
): CheckOutcome {
	if (stated !== null) {
		const value = parseRational(stated);
		if (!rational || !value?.equals(below) || (above && !value.equals(above)))
			return {
				checked: false,
				reason: `the lower side is ${printRational(below)}, the upper ${above ? printRational(above) : 'unproved'}, not ${stated}`
			};
	}
	return {
		checked: true,
		lower: toDoubleDown(below.sub(allowance)),
		upper: above && toDoubleUp(above.add(allowance)),
		exact: rational && above?.equals(below) ? printRational(below) : null,
		method
	};
}
