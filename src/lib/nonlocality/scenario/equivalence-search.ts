import type { EquivalenceGraph } from './equivalence-graph';
import { compareVectors, positionsOf, relabellingOf, vectorOf } from './equivalence-leaf';
import { Orbits } from './equivalence-orbits';
import { Refiner, type Colouring, type Trace } from './equivalence-refinement';
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

/** Refinement work in units of one vertex or edge looked at; two or three seconds. */
export const WORK_LIMIT = 5e7;

interface Leaf {
	/** Event at each canonical position. */
	readonly eventAt: readonly number[];
	readonly vector: Float64Array;
	readonly prefix: readonly number[];
	readonly traces: readonly Trace[];
}

/**
 * The canonical labelling: the smallest (traces of the refinement, then relabelled vector) over
 * all ways of telling the events apart one by one. Branches are cut when their trace is already
 * larger, and when a symmetry found on the way maps them to a branch already searched; symmetries
 * show where a leaf equals the first one or the best one.
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
	readonly #traces: Trace[] = [];
	readonly #prefix: number[] = [];
	/** By depth: how the traces so far compare with those of the first leaf and of the best one. */
	readonly #againstFirst: number[] = [];
	readonly #againstBest: number[] = [];
	#first: Leaf | null = null;
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
		const { events, vertexCount, neighbours } = this.graph;
		if (events.length * (vertexCount + neighbours.length) <= WORK_LIMIT / 4) {
			const children = events.map((_, v) => this.#refiner.individualise(root, v, 1));
			traces.push(...children.map((child) => child.trace.join(',')).sort());
		}
		return traces.join(';');
	}

	/** Returns the depth to go back to: a node deeper than that has nothing new below it. */
	#explore(node: Colouring, depth: number): number {
		this.#traces[depth] = node.trace;
		const toFirst = compareAt(this.#first, depth, node.trace, this.#againstFirst);
		const toBest = compareAt(this.#best, depth, node.trace, this.#againstBest);
		if (toFirst !== 0 && toBest > 0) return depth;
		const cell = this.#targetCell(node);
		if (!cell) return this.#visitLeaf(node, depth);
		const orbits = new Orbits(this.#generators, this.#prefix, depth);
		const explored: number[] = [];
		for (const vertex of cell) {
			if (this.#refiner.spent > this.workLimit && this.#best) {
				this.#complete = false;
				return depth;
			}
			if (explored.length > 0 && orbits.joins(vertex, explored)) continue;
			this.#prefix[depth] = vertex;
			const back = this.#explore(this.#refiner.individualise(node, vertex, depth + 1), depth + 1);
			if (back < depth) return back;
			explored.push(vertex);
		}
		return depth;
	}

	/** The first of the largest cells of events that are not yet told apart. */
	#targetCell({ vertices, sizes }: Colouring): number[] | null {
		let [target, largest] = [0, 1];
		for (let start = 0; start < this.graph.events.length; start += sizes[start] ?? 1) {
			const size = sizes[start] ?? 1;
			if (size > largest) [target, largest] = [start, size];
		}
		return largest === 1
			? null
			: [...vertices.subarray(target, target + largest)].sort((a, b) => a - b);
	}

	#visitLeaf(node: Colouring, depth: number): number {
		const eventAt = positionsOf(this.graph, node.colours);
		const vector = vectorOf(this.graph, eventAt);
		const leaf = {
			eventAt,
			vector,
			prefix: this.#prefix.slice(0, depth),
			traces: this.#traces.slice(0, depth + 1)
		};
		if (!this.#first || !this.#best) {
			this.#first = this.#best = leaf;
			return depth;
		}
		const known = [
			...(this.#againstFirst[depth] === 0 ? [this.#first] : []),
			...(this.#againstBest[depth] === 0 ? [this.#best] : [])
		].find((other) => compareVectors(vector, other.vector) === 0);
		if (known) {
			const symmetry = new Int32Array(eventAt.length);
			known.eventAt.forEach((e, position) => (symmetry[e] = eventAt[position] ?? 0));
			this.#generators.push(symmetry);
			let common = 0;
			while (common < depth && known.prefix[common] === leaf.prefix[common]) common++;
			return common;
		}
		const order = this.#againstBest[depth] || compareVectors(vector, this.#best.vector);
		if (order < 0) {
			this.#best = leaf;
			this.#againstBest.fill(0); // the path that led here is now the best one's
		}
		return depth;
	}
}

/**
 * How a path's traces compare with those on the way to a leaf, given how they do above; one longer
 * than the leaf's is larger. Kept in `known`, by depth.
 */
function compareAt(leaf: Leaf | null, depth: number, trace: Trace, known: number[]): number {
	const other = leaf?.traces[depth];
	const here = other ? trace[0] - other[0] || trace[1] - other[1] : leaf ? 1 : 0;
	const above = depth === 0 ? 0 : (known[depth - 1] ?? 0);
	return (known[depth] = above || here);
}
