import { overCommonDenominator } from '../exact/common-denominator';
import { exactOfDouble, ratio, toDoubleUp, type Rational, ZERO } from '../exact/rational';
import { isRational, type Functional } from './functional';
import type { Event } from './scenario';

/**
 * A functional with integer coefficients: f = (sum of coefficient * P(events)) / denominator, up
 * to `allowance` on every behaviour (0 exactly when f is rational).
 */
export interface IntegerFunctional {
	readonly terms: readonly { readonly coefficient: bigint; readonly events: readonly Event[] }[];
	readonly denominator: bigint;
	readonly allowance: Rational;
}

/**
 * Bits kept of the sum of |coefficients| when irrational ones are rounded to a common grid: sums
 * and differences of the rounded ones are then exact in doubles.
 */
const GRID_BITS = 50;

/**
 * Scales a functional to integers: exactly when it is rational, otherwise rounded to a power-of-two
 * grid, with the sum of all rounding and coefficient errors as the allowance (each P is in [0, 1]).
 */
export function integerFunctional(functional: Functional): IntegerFunctional {
	if (isRational(functional)) {
		const { integers, denominator } = overCommonDenominator(
			functional.terms.map(({ coefficient }) => coefficient.exact ?? ZERO)
		);
		const terms = functional.terms.map(({ events }, i) => ({
			coefficient: integers[i] ?? 0n,
			events
		}));
		return { terms, denominator, allowance: ZERO };
	}
	const sum = functional.terms.reduce((total, t) => total + Math.abs(t.coefficient.value), 0);
	const power = Math.max(0, GRID_BITS - Math.ceil(Math.log2(sum)));
	const denominator = 1n << BigInt(power);
	let allowance = ZERO;
	const terms = functional.terms.map(({ coefficient, events }) => {
		const exact = coefficient.exact ?? exactOfDouble(coefficient.value);
		const scaled = exact.mul(ratio(denominator));
		const rounded = scaled.round();
		allowance = allowance.add(scaled.sub(rounded).abs().div(ratio(denominator)));
		if (!coefficient.exact) allowance = allowance.add(exactOfDouble(coefficient.error));
		return { coefficient: rounded.s * rounded.n, events };
	});
	return { terms, denominator, allowance: exactOfDouble(toDoubleUp(allowance)) };
}

/** The sum of |coefficients|: no partial sum over a deterministic strategy exceeds it. */
export function absoluteSum(functional: IntegerFunctional): bigint {
	return functional.terms.reduce((total, { coefficient: c }) => total + (c < 0n ? -c : c), 0n);
}
