/** The orbits of events under the known symmetries that fix a path, kept up with new ones. */
export class Orbits {
	readonly #generators: readonly Int32Array[];
	readonly #path: readonly number[];
	readonly #length: number;
	#parents: Int32Array | null = null;
	#seen = 0;

	/** @param length how much of the path is to be fixed */
	constructor(generators: readonly Int32Array[], path: readonly number[], length: number) {
		this.#generators = generators;
		this.#path = path;
		this.#length = length;
	}

	/** Whether a vertex is in the orbit of one of those explored. */
	joins(vertex: number, explored: readonly number[]): boolean {
		this.#update();
		const root = this.#root(vertex);
		return explored.some((v) => this.#root(v) === root);
	}

	#update(): void {
		for (; this.#seen < this.#generators.length; this.#seen++) {
			const generator = this.#generators[this.#seen];
			if (!generator || !this.#fixesPath(generator)) continue;
			this.#parents ??= generator.map((_, v) => v);
			for (let v = 0; v < generator.length; v++) {
				const [a, b] = [this.#root(v), this.#root(generator[v] ?? v)];
				if (a !== b) this.#parents[Math.max(a, b)] = Math.min(a, b);
			}
		}
	}

	#fixesPath(generator: Int32Array): boolean {
		for (let i = 0; i < this.#length; i++) {
			const v = this.#path[i] ?? 0;
			if (generator[v] !== v) return false;
		}
		return true;
	}

	#root(v: number): number {
		const parents = this.#parents;
		if (!parents) return v;
		let root = v;
		while (parents[root] !== root) root = parents[root] ?? root;
		parents[v] = root;
		return root;
	}
}
