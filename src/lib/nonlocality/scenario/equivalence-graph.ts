import type { Event, Scenario } from './scenario';

/** A term of the functional as the search sees it. */
export interface LabelledTerm {
	/** One event per party, as indices into the graph's events. */
	readonly events: readonly number[];
	/** Rank of its value among the distinct values. */
	readonly rank: number;
}

/**
 * Vertices: events first, then inputs, then parties, then terms. An event is joined to its input
 * and to the terms it is in, an input to its party. Colours keep the kinds apart, so its symmetries
 * are those of the functional: they respect party > input > output.
 */
export interface EquivalenceGraph {
	readonly scenario: Scenario;
	readonly events: readonly Event[];
	/** Vertex of the input each event belongs to. */
	readonly inputOfEvent: readonly number[];
	/** Vertex of the party each input belongs to, by (input vertex - events). */
	readonly partyOfInput: readonly number[];
	readonly terms: readonly LabelledTerm[];
	readonly vertexCount: number;
	/** Neighbours of vertex v: neighbours[offsets[v]] up to offsets[v + 1]. */
	readonly offsets: Int32Array;
	readonly neighbours: Int32Array;
	/** Colour of each vertex before any refinement; parties with more inputs and outputs first. */
	readonly colours: Int32Array;
}

export function equivalenceGraph(
	scenario: Scenario,
	terms: readonly { readonly events: readonly Event[]; readonly rank: number }[]
): EquivalenceGraph {
	const events: Event[] = [];
	const inputs: [party: number, input: number][] = [];
	const places: number[] = [];
	const firstEvent = scenario.outputs.map((counts, p) =>
		counts.map((count, x) => {
			const first = events.length;
			for (let a = 0; a < count; a++) {
				events.push([p, x, a]);
				places.push(inputs.length);
			}
			inputs.push([p, x]);
			return first;
		})
	);
	const inputOfEvent = places.map((place) => events.length + place);
	const firstParty = events.length + inputs.length;
	const partyOfInput = inputs.map(([p]) => firstParty + p);
	const labelled = terms.map((term) => ({
		rank: term.rank,
		events: term.events.map(([p, x, a]) => (firstEvent[p]?.[x] ?? 0) + a)
	}));
	const firstTerm = firstParty + scenario.outputs.length;
	const edges: [number, number][] = [
		...inputOfEvent.map((input, e): [number, number] => [e, input]),
		...partyOfInput.map((party, i): [number, number] => [events.length + i, party]),
		...labelled.flatMap((term, t) => term.events.map((e): [number, number] => [e, firstTerm + t]))
	];
	const keys = [
		...events.map(([p, x]) => `0 ${partyKey(scenario, p)} ${inputKey(scenario, p, x)}`),
		...inputs.map(([p, x]) => `1 ${partyKey(scenario, p)} ${inputKey(scenario, p, x)}`),
		...scenario.outputs.map((_, p) => `2 ${partyKey(scenario, p)}`),
		...labelled.map((term) => `3 ${term.events.length} ${descending(term.rank)}`)
	];
	const distinct = new Map([...new Set(keys)].sort().map((key, colour) => [key, colour]));
	const vertexCount = keys.length;
	return {
		scenario,
		events,
		inputOfEvent,
		partyOfInput,
		terms: labelled,
		vertexCount,
		...adjacency(vertexCount, edges),
		colours: Int32Array.from(keys, (key) => distinct.get(key) ?? 0)
	};
}

function adjacency(vertexCount: number, edges: readonly (readonly [number, number])[]) {
	const offsets = new Int32Array(vertexCount + 1);
	for (const edge of edges) for (const v of edge) offsets[v + 1] = (offsets[v + 1] ?? 0) + 1;
	for (let v = 0; v < vertexCount; v++) offsets[v + 1] = (offsets[v + 1] ?? 0) + (offsets[v] ?? 0);
	const next = offsets.slice();
	const neighbours = new Int32Array(2 * edges.length);
	const join = (v: number, w: number) => {
		const place = next[v] ?? 0;
		neighbours[place] = w;
		next[v] = place + 1;
	};
	for (const [v, w] of edges) {
		join(v, w);
		join(w, v);
	}
	return { offsets, neighbours };
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
