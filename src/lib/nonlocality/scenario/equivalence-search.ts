import type { EquivalenceGraph } from './equivalence-graph';
import { Refiner, type Colouring } from './equivalence-refinement';
import type { Relabelling } from './relabelling';

/** The relabelled functional as data: terms by position in the canonical scenario. */
export interface CanonicalLabelling {
	readonly relabelling: Relabelling;
	/** False when the search was cut short: the labelling then still depends on the input's names. */
	readonly complete: boolean;
	/** Set when incomplete: the same for equivalent graphs; different ones may share it. */
	readonly invariant: string;
	/**
	 * Symmetries of the functional: generator[e] is the event that event e becomes, both as indices
	 * into the graph's events. They generate the whole symmetry group when the search is complete.
	 */
	readonly generators: readonly Int32Array[];
}

/** Refinement work in units of one event of one term; about a second. */
export const WORK_LIMIT = 1e8;

interface Leaf {
	/** Event at each canonical position. */
	readonly eventAt: readonly number[];
	readonly vector: Float64Array;
	readonly prefix: readonly number[];
	readonly traces: readonly (readonly [number, number])[];
}

/**
 * The canonical labelling: the smallest (traces of the refinement, then relabelled vector) over
 * all ways of telling the events apart one by one. Branches are cut when their trace is already
 * larger, and when a symmetry found on the way maps them to a branch already searched.
 * @see McKay, Practical graph isomorphism, Congressus Numerantium 30, 45 (1981)
 */
export function canonicalLabelling(
	graph: EquivalenceGraph,
	workLimit: number = WORK_LIMIT
): CanonicalLabelling {
	const search = new Search(graph, workLimit);
	search.run();
	return search.outcome();
}

class Search {
	readonly #refiner: Refiner;
	readonly #generators: Int32Array[] = [];
	readonly #traces: (readonly [number, number])[] = [];
	readonly #prefix: number[] = [];
	#best: Leaf | null = null;
	#complete = true;
	#invariant = '';

	constructor(
		readonly graph: EquivalenceGraph,
		readonly workLimit: number
	) {
		this.#refiner = new Refiner(graph);
	}

	run(): void {
		const root = this.#refiner.initial();
		this.#explore(root, 0);
		if (!this.#complete) this.#invariant = this.#describe(root);
	}

	outcome(): CanonicalLabelling {
		const eventAt = this.#best?.eventAt ?? this.graph.events.map((_, e) => e);
		return {
			relabelling: relabellingOf(this.graph, eventAt),
			complete: this.#complete,
			invariant: this.#invariant,
			generators: this.#generators
		};
	}

	/** Traces at the root and below it; the latter only where they cost no more than a search. */
	#describe(root: Colouring): string {
		const traces = [root.trace.join(',')];
		if (this.graph.events.length * this.#refiner.workPerPass <= WORK_LIMIT / 4) {
			const children = this.graph.events.map((_, v) => this.#refiner.individualise(root, v));
			traces.push(...children.map((child) => child.trace.join(',')).sort());
		}
		return traces.join(';');
	}

	/** Returns the depth to go back to: a node deeper than that has nothing new below it. */
	#explore(node: Colouring, depth: number): number {
		const known = this.#best?.traces[depth];
		if (this.#best) {
			const difference = known ? compareTraces(node.trace, known) : 1;
			if (difference > 0) return depth;
			if (difference < 0) this.#best = null; // every leaf below is smaller
		}
		this.#traces[depth] = node.trace;
		const cell = this.#targetCell(node);
		if (!cell) return this.#visitLeaf(node, depth);
		const explored: number[] = [];
		for (const vertex of cell) {
			if (this.#refiner.spent > this.workLimit && this.#best) {
				this.#complete = false;
				return depth;
			}
			if (explored.length > 0 && this.#isSymmetric(vertex, explored, depth)) continue;
			this.#prefix[depth] = vertex;
			const back = this.#explore(this.#refiner.individualise(node, vertex), depth + 1);
			if (back < depth) return back;
			explored.push(vertex);
		}
		return depth;
	}

	/** The first of the smallest cells of events that are not yet told apart. */
	#targetCell(node: Colouring): number[] | null {
		const cells = new Map<number, number[]>();
		for (let e = 0; e < this.graph.events.length; e++) {
			const colour = node.colours[e] ?? 0;
			const cell = cells.get(colour);
			if (cell) cell.push(e);
			else cells.set(colour, [e]);
		}
		let target: { colour: number; cell: number[] } | null = null;
		for (const [colour, cell] of cells) {
			if (cell.length === 1) continue;
			const smaller =
				!target ||
				cell.length < target.cell.length ||
				(cell.length === target.cell.length && colour < target.colour);
			if (smaller) target = { colour, cell };
		}
		return target?.cell ?? null;
	}

	#visitLeaf(node: Colouring, depth: number): number {
		const eventAt = positionsOf(this.graph, node.colours);
		const vector = vectorOf(this.graph, eventAt);
		const order = this.#best ? compareVectors(vector, this.#best.vector) : -1;
		if (order < 0) {
			const prefix = this.#prefix.slice(0, depth);
			this.#best = { eventAt, vector, prefix, traces: this.#traces.slice(0, depth + 1) };
			return depth;
		}
		if (order > 0 || !this.#best) return depth;
		const symmetry = new Int32Array(eventAt.length);
		this.#best.eventAt.forEach((e, position) => (symmetry[e] = eventAt[position] ?? 0));
		this.#generators.push(symmetry);
		const { prefix } = this.#best;
		let common = 0;
		while (common < depth && prefix[common] === this.#prefix[common]) common++;
		return common;
	}

	/** Whether a known symmetry that fixes the path so far maps the vertex to an explored one. */
	#isSymmetric(vertex: number, explored: readonly number[], depth: number): boolean {
		const path = this.#prefix.slice(0, depth);
		const fixing = this.#generators.filter((g) => path.every((v) => g[v] === v));
		if (fixing.length === 0) return false;
		const orbit = new Set([vertex]);
		for (const v of orbit) {
			for (const generator of fixing) orbit.add(generator[v] ?? v);
		}
		return explored.some((v) => orbit.has(v));
	}
}

function compareTraces(a: readonly [number, number], b: readonly [number, number]): number {
	return a[0] - b[0] || a[1] - b[1];
}

/** Events in canonical order: by party, input, output, each by colour. */
function positionsOf(graph: EquivalenceGraph, colours: Int32Array): number[] {
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

/** Sorted (place of the term, rank of its value) pairs: equal vectors are equal functionals. */
function vectorOf(graph: EquivalenceGraph, eventAt: readonly number[]): Float64Array {
	const position = new Int32Array(eventAt.length);
	eventAt.forEach((e, k) => (position[e] = k));
	const base = eventAt.length + 1;
	const pairs = graph.terms.map(({ events, rank }) => {
		const places = events.map((e) => position[e] ?? 0).sort((a, b) => a - b);
		return [places.reduce((key, place) => key * base + place + 1, 0), rank] as const;
	});
	pairs.sort((a, b) => a[0] - b[0]);
	return Float64Array.from(pairs.flat());
}

function compareVectors(a: Float64Array, b: Float64Array): number {
	for (let i = 0; i < a.length; i++) {
		const difference = (a[i] ?? 0) - (b[i] ?? 0);
		if (difference !== 0) return difference;
	}
	return 0;
}

function relabellingOf(graph: EquivalenceGraph, eventAt: readonly number[]): Relabelling {
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
