import { ONE, ZERO, ratio, type Rational } from '../nonlocality/exact/rational';
import type { Relation } from './claim';
import type { Enclosure } from './enclosure';
import type { StatedValue } from './stated-value';

/** An exact value is compared with a computed one to this, relative above 1: what solvers reach. */
const EXACT_TOLERANCE: Rational = ratio(1n, 10n ** 7n);
/** A rounded value is given at most this part of its half-width on top: a solver's own last digit. */
const ROUNDED_SHARE: Rational = ratio(1n, 10n);

/** Where the quantity may lie for the claim to hold; null: no end. */
export interface AcceptedSet {
	readonly low: Rational | null;
	readonly high: Rational | null;
}

/** The part of a stated value that decides: what transformations of it carry over. */
export type ReadInterval = Pick<StatedValue, 'low' | 'high' | 'value' | 'exact' | 'irrational'>;

/** max(1, |v|). */
export function sizeOf(value: Rational): Rational {
	const size = value.abs();
	return size.compare(ONE) > 0 ? size : ONE;
}

/** The tolerance tau by which the accepted set is widened. */
export function toleranceFor(reading: ReadInterval, enclosureExact: boolean): Rational {
	const tolerance = EXACT_TOLERANCE.mul(sizeOf(reading.value));
	if (reading.exact) return enclosureExact ? ZERO : tolerance;
	const share = reading.high.sub(reading.low).div(2).mul(ROUNDED_SHARE);
	return share.compare(tolerance) < 0 ? share : tolerance;
}

/** What the relation allows, before any tolerance. */
export function statedSet(reading: ReadInterval, relation: Relation): AcceptedSet {
	return {
		low: relation === '<=' ? null : reading.low,
		high: relation === '>=' ? null : reading.high
	};
}

/** The accepted set C of a claim. */
export function acceptedSet(
	reading: ReadInterval,
	relation: Relation,
	enclosureExact: boolean
): AcceptedSet {
	const tau = toleranceFor(reading, enclosureExact);
	const { low, high } = statedSet(reading, relation);
	return { low: low && low.sub(tau), high: high && high.add(tau) };
}

export type Fit = 'inside' | 'above' | 'below' | 'undecided';

/**
 * How the set lies to an enclosure: `inside` when the enclosure is within the set, `above` or
 * `below` when the whole set lies above or below it, `undecided` otherwise. Ends are compared as
 * exact rationals; touching ends meet.
 */
export function fitOf(set: AcceptedSet, enclosure: Pick<Enclosure, 'lower' | 'upper'>): Fit {
	const { lower, upper } = enclosure;
	if (set.low && upper && upper.compare(set.low) < 0) return 'above';
	if (set.high && lower && lower.compare(set.high) > 0) return 'below';
	const lowHolds = !set.low || (lower !== null && lower.compare(set.low) >= 0);
	const highHolds = !set.high || (upper !== null && upper.compare(set.high) <= 0);
	return lowHolds && highHolds ? 'inside' : 'undecided';
}
