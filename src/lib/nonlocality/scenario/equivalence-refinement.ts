import type { EquivalenceGraph } from './equivalence-graph';

/** Vertices by colour (0 .. count-1); vertices of one colour have not been told apart. */
export interface Colouring {
	readonly colours: Int32Array;
	readonly count: number;
	/** Depends on the colouring and the graph but not on how anything is named. */
	readonly trace: readonly [number, number];
}

/** The finalising mixer of MurmurHash3 (public domain, A. Appleby): spreads 32 bits. */
function mix(x: number): number {
	x = Math.imul(x ^ (x >>> 16), 0x85ebca6b);
	x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35);
	return x ^ (x >>> 16);
}

/** Two independent lanes: a chance agreement only leaves a cell unsplit, it never spoils the form. */
const SALTS = [0x3c6ef372, 0x1b873593] as const;

/**
 * Splits colours until nothing more can be told apart by the terms an event takes part in (their
 * coefficients and the colours of the other events), its input and its party. `spent` counts work.
 */
export class Refiner {
	spent = 0;
	readonly #graph: EquivalenceGraph;
	readonly #lanes: readonly [Int32Array, Int32Array];
	readonly #order: number[];
	/** Incidences of events in terms, and some for sorting. */
	readonly workPerPass: number;

	constructor(graph: EquivalenceGraph) {
		this.#graph = graph;
		this.#lanes = [new Int32Array(graph.vertexCount), new Int32Array(graph.vertexCount)];
		this.#order = Array.from({ length: graph.vertexCount }, (_, v) => v);
		this.workPerPass =
			graph.terms.reduce((sum, term) => sum + term.events.length, 0) + 8 * graph.vertexCount;
	}

	initial(): Colouring {
		return this.refine(this.#graph.initialColours, this.#graph.initialCount);
	}

	/** Gives one vertex a colour of its own, before the others of its cell, and refines. */
	individualise(parent: Colouring, vertex: number): Colouring {
		const own = parent.colours[vertex] ?? 0;
		const colours = parent.colours.map((colour, v) =>
			colour > own || (colour === own && v !== vertex) ? colour + 1 : colour
		);
		return this.refine(colours, parent.count + 1);
	}

	refine(colours: Int32Array, count: number): Colouring {
		let trace: [number, number] = [count, count];
		for (;;) {
			this.spent += this.workPerPass;
			this.#hash(colours, 0);
			this.#hash(colours, 1);
			const next = this.#rank(colours, trace);
			trace = next.trace;
			const settled = next.count === count;
			({ colours, count } = next);
			if (settled) return { colours, count, trace };
		}
	}

	#hash(colours: Int32Array, lane: 0 | 1): void {
		const { terms, inputOfEvent, partyOfInput, events } = this.#graph;
		const salt = SALTS[lane];
		const sums = this.#lanes[lane];
		sums.fill(0);
		const shades = colours.map((colour) => mix(colour + salt));
		const shade = (v: number) => shades[v] ?? 0;
		const add = (v: number, amount: number) => (sums[v] = ((sums[v] ?? 0) + amount) | 0);
		for (const term of terms) {
			let all = 0;
			for (const e of term.events) all = (all + shade(e)) | 0;
			const weight = mix(term.rank ^ salt);
			for (const e of term.events) add(e, mix((all - shade(e)) ^ weight));
		}
		inputOfEvent.forEach((input, e) => {
			add(e, mix(shade(input) ^ 0x5bd1e995));
			add(input, mix(shade(e) ^ 0x2545f491));
		});
		partyOfInput.forEach((party, i) => {
			add(events.length + i, mix(shade(party) ^ 0x27d4eb2f));
			add(party, mix(shade(events.length + i) ^ 0x165667b1));
		});
	}

	#rank(colours: Int32Array, before: readonly [number, number]) {
		const [a, b] = this.#lanes;
		const compare = (v: number, w: number) =>
			(colours[v] ?? 0) - (colours[w] ?? 0) ||
			(a[v] ?? 0) - (a[w] ?? 0) ||
			(b[v] ?? 0) - (b[w] ?? 0);
		this.#order.sort(compare);
		const next = new Int32Array(colours.length);
		let [t0, t1] = before;
		let colour = -1;
		this.#order.forEach((v, i) => {
			const previous = this.#order[i - 1];
			if (previous === undefined || compare(previous, v) !== 0) colour++;
			next[v] = colour;
			t0 = mix(Math.imul(t0, 31) ^ (a[v] ?? 0) ^ colour);
			t1 = mix(Math.imul(t1, 37) ^ (b[v] ?? 0) ^ (colour << 8));
		});
		return { colours: next, count: colour + 1, trace: [t0, t1] as [number, number] };
	}
}
