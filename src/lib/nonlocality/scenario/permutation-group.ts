/** Point i becomes `p[i]`. */
export type Permutation = Int32Array;

/** First a, then b. */
function compose(a: Permutation, b: Permutation): Permutation {
	return a.map((i) => b[i] ?? 0);
}

function invert(a: Permutation): Permutation {
	const inverse = new Int32Array(a.length);
	a.forEach((image, i) => (inverse[image] = i));
	return inverse;
}

const isIdentity = (a: Permutation) => a.every((image, i) => image === i);

/** The subgroup that fixes the points of all levels before, and how it moves one more point. */
interface Level {
	readonly point: number;
	readonly generators: Permutation[];
	/** For every point of the orbit an element that takes `point` there, and that one's inverse. */
	readonly transversal: Map<number, { to: Permutation; back: Permutation }>;
}

/**
 * A permutation group from generators, as a chain of stabilisers: its order, its elements, and the
 * subgroups of the chain. Sims, Computational methods in the study of permutation groups (1970).
 */
export class PermutationGroup {
	readonly #degree: number;
	readonly #levels: Level[] = [];

	constructor(degree: number, generators: Iterable<Permutation>) {
		this.#degree = degree;
		for (const generator of generators) this.#insert(0, generator);
	}

	get order(): bigint {
		return this.#orderFrom(0);
	}

	/** All elements, the identity first. The caller looks at the order before. */
	elements(): Permutation[] {
		return this.#elementsFrom(0);
	}

	/** The elements of the largest subgroup of the chain with at most `most` of them. */
	elementsOfSubgroup(most: number): Permutation[] {
		let depth = 0;
		while (this.#orderFrom(depth) > BigInt(most)) depth++;
		return this.#elementsFrom(depth);
	}

	#orderFrom(depth: number): bigint {
		return this.#levels
			.slice(depth)
			.reduce((order, { transversal }) => order * BigInt(transversal.size), 1n);
	}

	#elementsFrom(depth: number): Permutation[] {
		let found: Permutation[] = [Int32Array.from({ length: this.#degree }, (_, i) => i)];
		for (const { transversal } of this.#levels.slice(depth).reverse())
			found = [...transversal.values()].flatMap(({ to }) => found.map((g) => compose(g, to)));
		return found;
	}

	#contains(depth: number, element: Permutation): boolean {
		for (const { point, transversal } of this.#levels.slice(depth)) {
			const representative = transversal.get(element[point] ?? 0);
			if (!representative) return false;
			element = compose(element, representative.back);
		}
		return isIdentity(element);
	}

	/** Adds an element that fixes the points of the levels before `depth`. */
	#insert(depth: number, element: Permutation): void {
		if (this.#contains(depth, element)) return;
		const level = this.#levels[depth] ?? this.#newLevel(element);
		level.generators.push(element);
		const { generators, transversal } = level;
		for (const [at, { to }] of transversal) {
			for (const generator of generators) {
				const image = generator[at] ?? 0;
				const moved = compose(to, generator);
				const known = transversal.get(image);
				if (!known) transversal.set(image, { to: moved, back: invert(moved) });
				else this.#insert(depth + 1, compose(moved, known.back));
			}
		}
	}

	#newLevel(element: Permutation): Level {
		const point = element.findIndex((image, i) => image !== i);
		const identity = Int32Array.from(element, (_, i) => i);
		const level: Level = {
			point,
			generators: [],
			transversal: new Map([[point, { to: identity, back: identity }]])
		};
		this.#levels.push(level);
		return level;
	}
}
