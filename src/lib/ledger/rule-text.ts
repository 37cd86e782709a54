import { showBound, showEnclosure, withMinusSign, type Side } from './figures';
import type { RuleInput, RuleStation } from './rule';

/** Digits under a station. */
const FIGURE_PLACES = 6;

/** The figure under a station: a bound from outside, so rounded outward. */
export function stationFigure(value: number | null, side: Side): string {
	return value === null ? '' : withMinusSign(showBound(value, side, FIGURE_PLACES));
}

/** Both ends of the quantum block, or the digits they share once they meet. */
export function quantumFigures(lower: number | null, upper: number | null): string {
	const shown = showEnclosure(lower, upper);
	if (shown.lower === null) return withMinusSign(`≤ ${shown.upper ?? ''}`);
	if (shown.upper === null) return withMinusSign(`≥ ${shown.lower}`);
	const decimals = shown.value?.split('.')[1]?.length ?? 0;
	const known = shown.value !== null && (shown.lower === shown.upper || decimals >= FIGURE_PLACES);
	return withMinusSign(known && shown.value ? shown.value : `${shown.lower} … ${shown.upper}`);
}

/** What the rule shows, in words. */
export function describeRule(
	input: RuleInput,
	stations: readonly RuleStation[],
	nearest: number | null
): string {
	const values = stations.map(({ label, figures }) => `${label} ${figures}`);
	const known = values.length > 0 ? `In order: ${values.join(', ')}.` : 'No value is known yet.';
	if (!input.claimed) return known;
	return `${known} Claimed ${withMinusSign(input.claimed.printed.trim())}${relativeTo(input, nearest)}.`;
}

function relativeTo({ claimed, status }: RuleInput, nearest: number | null): string {
	if (nearest === null || status !== 'discrepancy' || !claimed) return '';
	const above = claimed.low > nearest;
	const shown = withMinusSign(showBound(nearest, above ? 'upper' : 'lower', FIGURE_PLACES));
	return `, ${above ? 'above' : 'below'} the nearest admissible value ${shown}`;
}
