import { seededRandom } from '../linalg/seeded-random';
import type { Pattern, RelabellingAction } from './relabelling-action';

/** The invariant moments that a pattern's words have a share in: numbers first .. first + count - 1. */
export interface PatternValues {
	readonly first: number;
	readonly count: number;
	/** Row-major, words of the pattern by invariant moments. */
	readonly values: Float64Array;
}

/** A projection of a random vector smaller than this (of its own norm) holds nothing new. */
const NOTHING_NEW = 1e-7;
const SEED = 20211;

/**
 * The moments that a group of relabellings (and taking adjoints) leaves in place: moment(w) of a
 * word w of centred letters is sum_j values[w][j] eta_j with free eta_j; number 0 is the identity's.
 * Found pattern by pattern, as the words are asked for.
 */
export class InvariantMoments {
	#count = 0;
	readonly #action: RelabellingAction;
	readonly #known = new Map<number, PatternValues>();

	constructor(action: RelabellingAction) {
		this.#action = action;
	}

	/** How many were found, the identity's included. */
	get count(): number {
		return this.#count;
	}

	of(pattern: Pattern, key: number): PatternValues {
		return this.#known.get(key) ?? this.#find(pattern, key);
	}

	#find(pattern: Pattern, key: number): PatternValues {
		const action = this.#action;
		const stabiliser: [element: number, reversed: boolean][] = [];
		const images = new Map<number, [element: number, reversed: boolean]>();
		for (const reversed of [false, true]) {
			for (let g = 0; g < action.order; g++) {
				const image = action.keyOf(action.image(g, pattern, reversed));
				if (image === key) stabiliser.push([g, reversed]);
				if (!images.has(image)) images.set(image, [g, reversed]);
			}
		}
		const dimension = action.dimension(pattern);
		const basis =
			dimension === 1
				? this.#signed(pattern, stabiliser)
				: this.#projected(pattern, dimension, stabiliser);
		const first = this.#count;
		this.#count += basis.length;
		for (const [image, [g, reversed]] of images) {
			const values = new Float64Array(dimension * basis.length);
			basis.forEach((vector, j) =>
				action
					.apply(g, pattern, vector, reversed)
					.forEach((value, at) => (values[at * basis.length + j] = value))
			);
			this.#known.set(image, { first, count: basis.length, values });
		}
		return this.#known.get(key) ?? { first, count: 0, values: new Float64Array(0) };
	}

	#signed(pattern: Pattern, stabiliser: readonly [number, boolean][]): Float64Array[] {
		const kept = stabiliser.every(([g]) => this.#action.sign(g, pattern) > 0);
		return kept ? [Float64Array.of(1)] : [];
	}

	/** An orthonormal basis of the vectors that the stabiliser fixes, by averaging random ones. */
	#projected(
		pattern: Pattern,
		dimension: number,
		stabiliser: readonly [number, boolean][]
	): Float64Array[] {
		const random = seededRandom(SEED, dimension);
		const basis: Float64Array[] = [];
		while (basis.length < dimension) {
			const vector = Float64Array.from({ length: dimension }, () => random.normal());
			const average = new Float64Array(dimension);
			for (const [g, reversed] of stabiliser)
				this.#action
					.apply(g, pattern, vector, reversed)
					.forEach((value, at) => (average[at] = (average[at] ?? 0) + value / stabiliser.length));
			for (let pass = 0; pass < 2; pass++)
				for (const other of basis) {
					const along = other.reduce((sum, value, at) => sum + value * (average[at] ?? 0), 0);
					other.forEach((value, at) => (average[at] = (average[at] ?? 0) - along * value));
				}
			const norm = Math.hypot(...average);
			if (norm <= NOTHING_NEW * Math.hypot(...vector)) break;
			basis.push(average.map((value) => value / norm));
		}
		return basis;
	}
}
