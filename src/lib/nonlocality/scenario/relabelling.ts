import { makeFunctional, type Functional } from './functional';
import { outputCount, type Event, type Scenario } from './scenario';

/**
 * New names: party p becomes `parties[p]`, its input x becomes `inputs[p][x]`, and output a of that
 * input `outputs[p][x][a]`. Each list is a permutation.
 */
export interface Relabelling {
	readonly parties: readonly number[];
	readonly inputs: readonly (readonly number[])[];
	readonly outputs: readonly (readonly (readonly number[])[])[];
}

/** @throws RangeError when the relabelling does not cover the event. */
export function relabelEvent(event: Event, relabelling: Relabelling): Event {
	const [p, x, a] = event;
	const party = relabelling.parties[p];
	const input = relabelling.inputs[p]?.[x];
	const output = relabelling.outputs[p]?.[x]?.[a];
	if (party === undefined || input === undefined || output === undefined)
		throw new RangeError(`the relabelling has no name for output ${a} of input ${x}, party ${p}`);
	return [party, input, output];
}

function relabelScenario(scenario: Scenario, relabelling: Relabelling): Scenario {
	const outputs: number[][] = scenario.outputs.map(() => []);
	scenario.outputs.forEach((counts, p) =>
		counts.forEach((_, x) => {
			const [party, input] = relabelEvent([p, x, 0], relabelling);
			const row = outputs[party] ?? [];
			row[input] = outputCount(scenario, p, x);
		})
	);
	return { outputs };
}

/** The functional that gives every relabelled behaviour the value f gives the original one. */
export function relabelFunctional(functional: Functional, relabelling: Relabelling): Functional {
	return makeFunctional(
		relabelScenario(functional.scenario, relabelling),
		functional.terms.map(({ coefficient, events }) => ({
			coefficient,
			events: events.map((event) => relabelEvent(event, relabelling))
		}))
	);
}
