import type { Scenario } from './scenario';

/** An integer-labelled functional without constant, as search and refinement see it. */
export interface LabelledTerm {
	/** One event per party, as indices into the graph's events. */
	readonly events: readonly number[];
	/** Rank of its value among the distinct values. */
	readonly rank: number;
}

/**
 * Vertices: events first, then inputs, then parties. Only relabellings that respect
 * party > input > output keep it, so its symmetries are those of the functional.
 */
export interface EquivalenceGraph {
	readonly scenario: Scenario;
	readonly events: readonly (readonly [party: number, input: number, output: number])[];
	/** Vertex of the input each event belongs to. */
	readonly inputOfEvent: readonly number[];
	/** Vertex of the party each input belongs to, by (input vertex - events). */
	readonly partyOfInput: readonly number[];
	readonly vertexCount: number;
	readonly terms: readonly LabelledTerm[];
	/** Colour of each vertex before any refinement; parties with more inputs and outputs first. */
	readonly initialColours: Int32Array;
	readonly initialCount: number;
}

export function equivalenceGraph(
	scenario: Scenario,
	terms: readonly { readonly events: readonly (readonly number[])[]; readonly rank: number }[]
): EquivalenceGraph {
	const events: [number, number, number][] = [];
	const index = new Map<string, number>();
	const inputs: [party: number, input: number, count: number][] = [];
	scenario.outputs.forEach((counts, p) =>
		counts.forEach((count, x) => {
			inputs.push([p, x, count]);
			for (let a = 0; a < count; a++) {
				index.set(`${p}.${x}.${a}`, events.length);
				events.push([p, x, a]);
			}
		})
	);
	const inputVertex = new Map(inputs.map(([p, x], i) => [`${p}.${x}`, events.length + i]));
	const firstParty = events.length + inputs.length;
	const keys = [
		...events.map(([p, x]) => `0 ${partyKey(scenario, p)} ${inputKey(scenario, p, x)}`),
		...inputs.map(([p, x]) => `1 ${partyKey(scenario, p)} ${inputKey(scenario, p, x)}`),
		...scenario.outputs.map((_, p) => `2 ${partyKey(scenario, p)}`)
	];
	const distinct = [...new Set(keys)].sort();
	return {
		scenario,
		events,
		inputOfEvent: events.map(([p, x]) => inputVertex.get(`${p}.${x}`) ?? 0),
		partyOfInput: inputs.map(([p]) => firstParty + p),
		vertexCount: keys.length,
		terms: terms.map((term) => ({
			rank: term.rank,
			events: term.events.map((event) => index.get(event.join('.')) ?? 0)
		})),
		initialColours: Int32Array.from(keys, (key) => distinct.indexOf(key)),
		initialCount: distinct.length
	};
}

/** Sorts descending by number of inputs, then by the sorted numbers of outputs. */
function partyKey(scenario: Scenario, party: number): string {
	const counts = [...(scenario.outputs[party] ?? [])].sort((a, b) => b - a);
	return [counts.length, ...counts].map(descending).join('.');
}

function inputKey(scenario: Scenario, party: number, input: number): string {
	return descending(scenario.outputs[party]?.[input] ?? 0);
}

/** A text that sorts in the opposite order of the number. */
function descending(n: number): string {
	return String(1e9 - n);
}
