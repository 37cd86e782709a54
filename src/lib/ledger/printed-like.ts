import { toDecimal, type Rational } from '../nonlocality/exact/rational';
import { finiteDecimal, showEnclosure, showExact } from './figures';
import type { StatedValue } from './stated-value';

/** Both ends of something computed. */
export interface Ends {
	readonly lower: Rational | null;
	readonly upper: Rational | null;
}

/** Digits shown past the printed ones, so that a reader sees how the printed ones come about. */
const PAST_PRINTED = 3;
const PLACES_WITHOUT_DIGITS = 7;

/** The value to the digits that are known: `exactly 1`, `0.2514709`, or both ends. */
export function knownValue(ends: Ends, reading: Pick<StatedValue, 'precision'>): string {
	const { lower, upper } = ends;
	const wanted = (reading.precision ?? PLACES_WITHOUT_DIGITS - PAST_PRINTED) + PAST_PRINTED;
	const places = Math.max(0, Math.min(12, wanted));
	if (lower && upper) {
		if (lower.equals(upper)) {
			const whole = finiteDecimal(lower, places);
			return whole ?? showExact(lower, places);
		}
		for (let digits = places; digits >= Math.min(places, 2); digits--) {
			const rounded = toDecimal(lower, digits, 'nearest');
			if (rounded === toDecimal(upper, digits, 'nearest')) return rounded;
		}
	}
	const shown = showEnclosure(lower, upper);
	if (shown.lower === null) return `at most ${shown.upper ?? 'unknown'}`;
	return shown.upper === null ? `at least ${shown.lower}` : `${shown.lower} to ${shown.upper}`;
}

/** A computed value as the paper would have printed it: to the printed digits, cut off if told so. */
export function printLike(ends: Ends, reading: StatedValue, truncated = false): string {
	const { lower, upper } = ends;
	const middle = lower && upper ? lower.add(upper).div(2) : (lower ?? upper);
	if (!middle || reading.precision === null) return knownValue(ends, reading);
	const shown = reading.percent ? middle.mul(100) : middle;
	const places = Math.max(0, reading.precision - (reading.percent ? 2 : 0));
	const direction = truncated ? (middle.s < 0n ? 'up' : 'down') : 'nearest';
	return toDecimal(shown, places, direction) + (reading.percent ? ' %' : '');
}
