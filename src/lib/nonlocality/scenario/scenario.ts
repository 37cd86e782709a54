/**
 * Who measures what: `outputs[party][input]` is the number of outputs (at least 2) of that
 * measurement. Parties, inputs and outputs count from 0.
 */
export interface Scenario {
	readonly outputs: readonly (readonly number[])[];
}

/** An outcome of one measurement: [party, input, output]. */
export type Event = readonly [party: number, input: number, output: number];

export function partyCount(scenario: Scenario): number {
	return scenario.outputs.length;
}

/** Number of outputs of a measurement. @throws RangeError when there is no such measurement. */
export function outputCount(scenario: Scenario, party: number, input: number): number {
	const count = scenario.outputs[party]?.[input];
	if (count === undefined) throw new RangeError(`party ${party} has no input ${input}`);
	return count;
}
