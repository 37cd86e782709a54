import type { EquivalenceGraph } from './equivalence-graph';

/** Depends on how a colouring came about, but not on how anything is named. */
export type Trace = readonly [number, number];

/**
 * Vertices by colour, an ordered partition: a cell is a run of `vertices` that have not been told
 * apart, and the place where it starts is its colour.
 */
interface Partition {
	readonly vertices: Int32Array;
	/** Where each vertex stands in `vertices`. */
	readonly places: Int32Array;
	/** Colour of each vertex. */
	readonly colours: Int32Array;
	/** Size of the cell, by colour. */
	readonly sizes: Int32Array;
}

export interface Colouring extends Partition {
	readonly trace: Trace;
}

/** The finalising mixer of MurmurHash3 (public domain, A. Appleby): spreads 32 bits. */
function mix(x: number): number {
	x = Math.imul(x ^ (x >>> 16), 0x85ebca6b);
	x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35);
	return x ^ (x >>> 16);
}

/** Two lanes with salts of their own: a chance agreement only costs time, it never spoils the form. */
const SALTS = [0x3c6ef372, 0x1b873593] as const;

/**
 * Splits cells until all vertices of a cell have as many neighbours in every cell as each other
 * (colour refinement). Cells still to be compared with wait in a queue, so that a step costs what
 * it touches. `spent` counts vertices and edges looked at.
 */
export class Refiner {
	spent = 0;
	readonly #graph: EquivalenceGraph;
	/** Neighbours of each vertex in the cell at hand; zero between steps. */
	readonly #counts: Int32Array;
	/** The vertices that have any, #touchedCount of them. */
	readonly #touched: Int32Array;
	#touchedCount = 0;
	/** Touched vertices of each cell, by colour; zero between steps. */
	readonly #touchedOf: Int32Array;
	readonly #waiting: Uint8Array;
	/** By depth. */
	readonly #arrays: Partition[] = [];

	constructor(graph: EquivalenceGraph) {
		this.#graph = graph;
		this.#counts = new Int32Array(graph.vertexCount);
		this.#touched = new Int32Array(graph.vertexCount);
		this.#touchedOf = new Int32Array(graph.vertexCount);
		this.#waiting = new Uint8Array(graph.vertexCount);
	}

	initial(): Colouring {
		const { vertexCount, colours: given } = this.#graph;
		const partition = this.#newPartition();
		const { vertices, places, colours, sizes } = partition;
		for (let v = 0; v < vertexCount; v++) vertices[v] = v;
		vertices.sort((v, w) => (given[v] ?? 0) - (given[w] ?? 0));
		const cells: number[] = [];
		vertices.forEach((v, place) => {
			const before = vertices[place - 1];
			if (before === undefined || given[before] !== given[v]) cells.push(place);
			const start = cells.at(-1) ?? 0;
			places[v] = place;
			colours[v] = start;
			sizes[start] = (sizes[start] ?? 0) + 1;
		});
		return this.#refine(partition, cells);
	}

	#newPartition(): Partition {
		const array = () => new Int32Array(this.#graph.vertexCount);
		return { vertices: array(), places: array(), colours: array(), sizes: array() };
	}

	/**
	 * Gives one vertex a colour of its own, before the others of its cell, and refines. The answer
	 * lives in the arrays of its depth in the search, until the next one there.
	 */
	individualise(parent: Colouring, vertex: number, depth: number): Colouring {
		const copy = (this.#arrays[depth] ??= this.#newPartition());
		copy.vertices.set(parent.vertices);
		copy.places.set(parent.places);
		copy.colours.set(parent.colours);
		copy.sizes.set(parent.sizes);
		this.spent += copy.vertices.length >> 2; // four copies of whole arrays are cheap
		const start = copy.colours[vertex] ?? 0;
		const size = copy.sizes[start] ?? 1;
		swap(copy, vertex, start);
		for (let place = start + 1; place < start + size; place++)
			copy.colours[copy.vertices[place] ?? 0] = start + 1;
		copy.sizes[start] = 1;
		if (size > 1) copy.sizes[start + 1] = size - 1;
		return this.#refine(copy, [start]);
	}

	#refine(partition: Partition, queue: number[]): Colouring {
		const trace: [number, number] = [queue.length, queue.length];
		for (const cell of queue) this.#waiting[cell] = 1;
		for (let next = 0; next < queue.length; next++) {
			const cell = queue[next] ?? 0;
			this.#waiting[cell] = 0;
			this.#count(partition, cell);
			this.#addToTrace(partition, cell, trace);
			this.#split(partition, queue);
		}
		return { ...partition, trace };
	}

	/** Counts the neighbours of every vertex in a cell. */
	#count({ vertices, sizes }: Partition, cell: number): void {
		const { offsets, neighbours } = this.#graph;
		const counts = this.#counts;
		this.#touchedCount = 0;
		const end = cell + (sizes[cell] ?? 0);
		for (let place = cell; place < end; place++) {
			const v = vertices[place] ?? 0;
			const last = offsets[v + 1] ?? 0;
			for (let i = offsets[v] ?? 0; i < last; i++) {
				const w = neighbours[i] ?? 0;
				const count = counts[w] ?? 0;
				if (count === 0) this.#touched[this.#touchedCount++] = w;
				counts[w] = count + 1;
			}
			this.spent += last - (offsets[v] ?? 0);
		}
	}

	/** The order in which vertices were touched depends on their names: a sum does not. */
	#addToTrace({ colours }: Partition, cell: number, trace: [number, number]): void {
		let [a, b] = [cell, cell];
		for (let i = 0; i < this.#touchedCount; i++) {
			const v = this.#touched[i] ?? 0;
			const pair = Math.imul(colours[v] ?? 0, 0x9e3779b1) ^ (this.#counts[v] ?? 0);
			a = (a + mix(pair ^ SALTS[0])) | 0;
			b = (b + mix(pair ^ SALTS[1])) | 0;
		}
		trace[0] = mix(Math.imul(trace[0], 31) ^ a);
		trace[1] = mix(Math.imul(trace[1], 37) ^ b);
	}

	/** Splits the touched cells by the counts, and resets these. */
	#split(partition: Partition, queue: number[]): void {
		const { colours, sizes } = partition;
		const cells: number[] = [];
		for (let i = 0; i < this.#touchedCount; i++) {
			const v = this.#touched[i] ?? 0;
			const cell = colours[v] ?? 0;
			const size = sizes[cell] ?? 1;
			if (size === 1) continue;
			// Touched vertices gather at the end of their cell.
			const before = this.#touchedOf[cell] ?? 0;
			if (before === 0) cells.push(cell);
			this.#touchedOf[cell] = before + 1;
			swap(partition, v, cell + size - 1 - before);
		}
		if (cells.length > 1) cells.sort((a, b) => a - b);
		for (const cell of cells) this.#splitCell(partition, cell, queue);
		for (let i = 0; i < this.#touchedCount; i++) this.#counts[this.#touched[i] ?? 0] = 0;
	}

	#splitCell(partition: Partition, cell: number, queue: number[]): void {
		const { vertices, colours, sizes } = partition;
		const counts = this.#counts;
		const end = cell + (sizes[cell] ?? 1);
		const first = end - (this.#touchedOf[cell] ?? 0);
		this.#touchedOf[cell] = 0;
		if (!this.#sortByCount(partition, first, end) && first === cell) return;
		const waiting = this.#waiting[cell] === 1;
		// Vertices that were not touched stand first; each part ends where the count changes.
		let [start, largest, known] = [cell, cell, queue.length];
		for (let place = Math.max(first, cell + 1); place <= end; place++) {
			const v = vertices[place] ?? 0;
			const before = vertices[place - 1] ?? 0;
			if (place === end || (counts[v] ?? 0) !== (counts[before] ?? 0)) {
				sizes[start] = place - start;
				if (place - start > (sizes[largest] ?? 0)) largest = start;
				queue.push(start);
				start = place;
			}
			if (place < end) colours[v] = start;
		}
		// Whoever has been compared with the whole cell need not be with its largest part.
		const skip = waiting ? cell : largest;
		for (let i = known; i < queue.length; i++) {
			const part = queue[i] ?? 0;
			if (part === skip) continue;
			this.#waiting[part] = 1;
			queue[known++] = part;
		}
		queue.length = known;
	}

	/** Sorts a run of vertices by their counts; false when these are all the same. */
	#sortByCount({ vertices, places }: Partition, from: number, to: number): boolean {
		const counts = this.#counts;
		const least = counts[vertices[from] ?? 0];
		let place = from + 1;
		while (place < to && counts[vertices[place] ?? 0] === least) place++;
		if (place >= to) return false;
		vertices.subarray(from, to).sort((v, w) => (counts[v] ?? 0) - (counts[w] ?? 0));
		for (place = from; place < to; place++) places[vertices[place] ?? 0] = place;
		this.spent += 4 * (to - from);
		return true;
	}
}

/** Moves a vertex to another place of its cell. */
function swap(
	{ vertices, places }: Pick<Colouring, 'vertices' | 'places'>,
	vertex: number,
	place: number
): void {
	const other = vertices[place] ?? 0;
	const from = places[vertex] ?? 0;
	vertices[place] = vertex;
	vertices[from] = other;
	places[vertex] = place;
	places[other] = from;
}
