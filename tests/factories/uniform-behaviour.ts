import {
	COEFFICIENT_ONE,
	exactCoefficient,
	multiplyCoefficients
} from '../../src/lib/nonlocality/exact/coefficient';
import { ratio } from '../../src/lib/nonlocality/exact/rational';
import type { Behaviour } from '../../src/lib/nonlocality/scenario/behaviour';
import type { Scenario } from '../../src/lib/nonlocality/scenario/scenario';

/** Product of 1/outputs: every party answers at random. */
export function uniformBehaviour(scenario: Scenario): Behaviour {
	return {
		scenario,
		probability: (events) =>
			events.reduce(
				(product, [p, x]) =>
					multiplyCoefficients(
						product,
						exactCoefficient(ratio(1n, BigInt(scenario.outputs[p]?.[x] ?? 1)))
					),
				COEFFICIENT_ONE
			)
	};
}
