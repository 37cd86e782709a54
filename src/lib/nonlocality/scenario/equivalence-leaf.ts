import type { EquivalenceGraph } from './equivalence-graph';
import type { Relabelling } from './relabelling';

/** Events in canonical order: by party, input, output, each by colour. */
export function positionsOf(graph: EquivalenceGraph, colours: Int32Array): number[] {
	const { events, inputOfEvent, partyOfInput } = graph;
	const key = (e: number) => {
		const input = inputOfEvent[e] ?? 0;
		const party = partyOfInput[input - events.length] ?? 0;
		return [colours[party] ?? 0, colours[input] ?? 0, colours[e] ?? 0] as const;
	};
	return events
		.map((_, e) => ({ e, key: key(e) }))
		.sort((a, b) => a.key[0] - b.key[0] || a.key[1] - b.key[1] || a.key[2] - b.key[2])
		.map(({ e }) => e);
}

/** Sorted (places of the term, rank of its value): equal vectors are equal functionals. */
export function vectorOf(graph: EquivalenceGraph, eventAt: readonly number[]): Float64Array {
	const position = new Int32Array(eventAt.length);
	eventAt.forEach((e, k) => (position[e] = k));
	const base = eventAt.length + 1;
	const entries = graph.terms.map(({ events, rank }) => {
		const places = events.map((e) => position[e] ?? 0).sort((a, b) => a - b);
		// Three places in a number each, so that every key is an integer below 2^53.
		const key = (from: number) =>
			places.slice(from, from + 3).reduce((sum, place) => sum * base + place + 1, 0);
		return [key(0), key(3), rank] as const;
	});
	entries.sort((a, b) => a[0] - b[0] || a[1] - b[1]);
	return Float64Array.from(entries.flat());
}

export function compareVectors(a: Float64Array, b: Float64Array): number {
	for (let i = 0; i < a.length; i++) {
		const difference = (a[i] ?? 0) - (b[i] ?? 0);
		if (difference !== 0) return difference;
	}
	return 0;
}

export function relabellingOf(graph: EquivalenceGraph, eventAt: readonly number[]): Relabelling {
	const { outputs } = graph.scenario;
	const parties: number[] = [];
	const inputs: number[][] = outputs.map(() => []);
	const names: number[][][] = outputs.map((counts) => counts.map(() => []));
	let partyCount = 0;
	const inputCounts = outputs.map(() => 0);
	const outputCounts = outputs.map((counts) => counts.map(() => 0));
	for (const e of eventAt) {
		const [p, x, a] = graph.events[e] ?? [0, 0, 0];
		parties[p] ??= partyCount++;
		const row = inputs[p];
		const list = names[p]?.[x];
		const counts = outputCounts[p];
		if (!row || !list || !counts) continue;
		if (row[x] === undefined) {
			row[x] = inputCounts[p] ?? 0;
			inputCounts[p] = row[x] + 1;
		}
		list[a] = counts[x] ?? 0;
		counts[x] = list[a] + 1;
	}
	return { parties, inputs, outputs: names };
}
