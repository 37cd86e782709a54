import { negateCoefficient, type Coefficient } from '../exact/coefficient';
import type { Term } from './functional';
import type { Event } from './scenario';

/** A two-outcome observable, A_x = P(0|x) - P(1|x). */
export type Observable = readonly [party: number, input: number];

/**
 * coefficient * <product of observables of different parties> as the 2^k terms of its joint
 * probabilities: the sign is that of the parity of the outputs.
 */
export function correlatorTerms(
	coefficient: Coefficient,
	observables: readonly Observable[]
): Term[] {
	const negative = negateCoefficient(coefficient);
	return Array.from({ length: 2 ** observables.length }, (_, outputs) => {
		let odd = false;
		const events = observables.map(([party, input], i): Event => {
			const output = (outputs >> i) & 1;
			if (output === 1) odd = !odd;
			return [party, input, output];
		});
		return { coefficient: odd ? negative : coefficient, events };
	});
}
