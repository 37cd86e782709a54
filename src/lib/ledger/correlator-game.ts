import { ZERO, ratio, type Rational } from '../nonlocality/exact/rational';
import type { Functional } from '../nonlocality/scenario/functional';
import { zeroSumForm } from '../nonlocality/scenario/zero-sum-form';

/** f = constant + sum of weights e_x of full correlators: a game won with probability below. */
export interface CorrelatorGame {
	/** Sum of |e_x|: winning probability = 1/2 + (f - constant) / (2 weight). */
	readonly weight: Rational;
	readonly constant: Rational;
}

/**
 * The game of a functional that is, but for its constant, a sum of correlators of all parties with
 * two outputs each and rational coefficients; null for any other.
 */
export function correlatorGame(functional: Functional): CorrelatorGame | null {
	const { scenario, constant, blocks } = zeroSumForm(functional);
	if (constant.exact === null || blocks.length === 0) return null;
	let weight = ZERO;
	for (const { measurements, dimensions, entries } of blocks) {
		const full = measurements.length === scenario.outputs.length;
		const [first] = entries;
		if (!full || dimensions.some((d) => d !== 2) || !first?.exact) return null;
		// With two outputs a zero-sum table is e (-1)^(sum of the outputs): its first entry is e.
		weight = weight.add(first.exact.abs());
	}
	return { weight, constant: constant.exact };
}

/** value = 1/2 + (f - constant) / (2 weight), as scale and shift. */
export function winningProbabilityMap({ weight, constant }: CorrelatorGame): {
	readonly scale: Rational;
	readonly shift: Rational;
} {
	const scale = ratio(1n, 2n).div(weight);
	return { scale, shift: ratio(1n, 2n).sub(constant.mul(scale)) };
}

/** The game of scale * f + shift, from that of f; scale is positive. */
export function gameOfMapped(
	{ weight, constant }: CorrelatorGame,
	scale: Rational,
	shift: Rational
): CorrelatorGame {
	return { weight: weight.mul(scale), constant: constant.mul(scale).add(shift) };
}
