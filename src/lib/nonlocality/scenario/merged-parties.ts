import { makeFunctional, type Functional } from './functional';
import { outputCount, type Event, type Scenario } from './scenario';

/** Two non-empty groups of parties, each in ascending order, party 0 in the first. */
export type Bipartition = readonly [readonly number[], readonly number[]];

/** All ways to split `count` parties into two groups: 2^(count - 1) - 1. */
export function bipartitions(count: number): Bipartition[] {
	const parties = Array.from({ length: count }, (_, p) => p);
	return Array.from({ length: 2 ** (count - 1) - 1 }, (_, mask): Bipartition => {
		const second = parties.filter((p) => p > 0 && ((mask + 1) >> (p - 1)) & 1);
		return [parties.filter((p) => !second.includes(p)), second];
	});
}

/** The scenario of some of the parties, numbered from 0 in the group's order. */
export function scenarioOfGroup(scenario: Scenario, group: readonly number[]): Scenario {
	return { outputs: group.map((p) => scenario.outputs[p] ?? []) };
}

/** One joint input of a group: an input per member, and the outputs each of them has there. */
export interface JointInput {
	readonly inputs: readonly number[];
	readonly outputs: readonly number[];
}

/** Row-major, the last member's input fastest. */
export function jointInputs(scenario: Scenario, group: readonly number[]): JointInput[] {
	return group.reduce<JointInput[]>(
		(found, p) =>
			found.flatMap(({ inputs, outputs }) =>
				(scenario.outputs[p] ?? []).map((count, x) => ({
					inputs: [...inputs, x],
					outputs: [...outputs, count]
				}))
			),
		[{ inputs: [], outputs: [] }]
	);
}

/**
 * The functional with each group as one party: its inputs are the group's joint inputs, its outputs
 * the joint outputs (row-major, the last member fastest).
 * @throws RangeError when a term measures only a part of a group
 */
export function mergeParties(
	functional: Functional,
	groups: readonly (readonly number[])[]
): Functional {
	const { scenario } = functional;
	const outputs = groups.map((group) =>
		jointInputs(scenario, group).map((joint) => joint.outputs.reduce((a, b) => a * b, 1))
	);
	const terms = functional.terms.map(({ coefficient, events }) => ({
		coefficient,
		events: groups.flatMap((group, g) => {
			const own = events.filter(([p]) => group.includes(p));
			if (own.length === 0) return [];
			if (own.length !== group.length)
				throw new RangeError(`a term measures only a part of the parties ${group.join(', ')}`);
			return [mergedEvent(scenario, own, g)];
		})
	}));
	return makeFunctional({ outputs }, terms);
}

function mergedEvent(scenario: Scenario, events: readonly Event[], group: number): Event {
	let [input, output] = [0, 0];
	for (const [p, x, a] of events) {
		input = input * (scenario.outputs[p]?.length ?? 1) + x;
		output = output * outputCount(scenario, p, x) + a;
	}
	return [group, input, output];
}
