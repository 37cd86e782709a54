import type { Word } from './moment-words';
import { InvariantMoments } from './invariant-moments';
import type { CentredStrings, Combination } from './centred-strings';
import type { Pattern, RelabellingAction } from './relabelling-action';

/**
 * The moment matrix of words of centred letters, restricted to invariant moments eta (eta_0 = 1):
 * entry (i, j), j <= i, is the sum over its `moments` of value * eta. At eta = 0 (the maximally
 * mixed state) it is the unit matrix.
 */
export interface CentredMomentMatrix {
	readonly size: number;
	/** How many invariant moments there are beside the identity's. */
	readonly unknowns: number;
	/** Of cell i (i + 1) / 2 + j. */
	readonly start: Int32Array;
	readonly moments: Int32Array;
	readonly values: Float64Array;
}

/** Values this small are rounding errors: the others are products of numbers of about 1. */
const NEGLIGIBLE = 1e-13;

/** @returns null when there would be more than `mostEntries`. */
export function centredMomentMatrix(
	parties: readonly CentredStrings[],
	words: readonly Word[],
	action: RelabellingAction,
	invariants: InvariantMoments,
	mostEntries: number,
	poll: () => void
): CentredMomentMatrix | null {
	const tables = parties.map((party, p) => productTable(party, action, words, p));
	const n = words.length;
	const start = new Int32Array((n * (n + 1)) / 2 + 1);
	const moments: number[] = [];
	const values: number[] = [];
	let sums = new Float64Array(64);
	let touched: number[] = [];
	const pattern: number[] = parties.map(() => 0);

	const addProducts = (i: number, j: number, p: number, at: number, weight: number): void => {
		const table = tables[p];
		if (!table) {
			const { first, count, values: shares } = invariants.of(pattern, action.keyOf(pattern));
			if (first + count > sums.length) {
				const longer = new Float64Array(2 * (first + count));
				longer.set(sums);
				sums = longer;
			}
			for (let k = 0; k < count; k++) {
				const amount = weight * (shares[at * count + k] ?? 0);
				if (amount === 0) continue;
				const before = sums[first + k] ?? 0;
				if (before === 0) touched.push(first + k);
				sums[first + k] = before + amount;
			}
			return;
		}
		const { place, count, products } = table;
		for (const product of products[(place[i] ?? 0) * count + (place[j] ?? 0)] ?? []) {
			pattern[p] = product.pattern;
			addProducts(i, j, p + 1, at * product.dimension + product.at, weight * product.weight);
		}
	};

	let cell = 0;
	for (let i = 0; i < n; i++) {
		poll();
		for (let j = 0; j <= i; j++) {
			addProducts(i, j, 0, 0, 1);
			for (const moment of touched) {
				const value = sums[moment] ?? 0;
				sums[moment] = 0; // listed twice when it was 0 in between
				if (Math.abs(value) < NEGLIGIBLE) continue;
				moments.push(moment);
				values.push(value);
			}
			touched = [];
			start[++cell] = moments.length;
		}
		if (moments.length > mostEntries) return null;
	}
	return {
		size: n,
		unknowns: invariants.count - 1,
		start,
		moments: Int32Array.from(moments),
		values: Float64Array.from(values)
	};
}

/** Writes out the moment matrix of centred words, both triangles. */
export function fillCentred(matrix: CentredMomentMatrix, eta: Float64Array): Float64Array {
	const { size: n, start, moments, values } = matrix;
	const filled = new Float64Array(n * n);
	let cell = 0;
	for (let i = 0; i < n; i++) {
		for (let j = 0; j <= i; j++, cell++) {
			let sum = 0;
			const end = start[cell + 1] ?? 0;
			for (let at = start[cell] ?? 0; at < end; at++)
				sum += (values[at] ?? 0) * (eta[moments[at] ?? 0] ?? 0);
			filled[i * n + j] = sum;
			filled[j * n + i] = sum;
		}
	}
	return filled;
}

interface PlacedProduct {
	readonly pattern: number;
	readonly at: number;
	readonly dimension: number;
	readonly weight: number;
}

interface ProductTable {
	readonly place: Int32Array;
	readonly count: number;
	readonly products: readonly (readonly PlacedProduct[])[];
}

/** All products of one party's strings, with their places in the patterns. */
function productTable(
	party: CentredStrings,
	action: RelabellingAction,
	words: readonly Word[],
	p: number
): ProductTable {
	const distinct: number[] = [];
	const placeOf = new Map<number, number>();
	const place = Int32Array.from(words, (word) => {
		const id = party.strings.numberOf(word[p] ?? []);
		const known = placeOf.get(id);
		if (known !== undefined) return known;
		placeOf.set(id, distinct.length);
		return distinct.push(id) - 1;
	});
	const placed = (combination: Combination): PlacedProduct[] =>
		combination.map(([string, weight]) => {
			const { pattern, at } = action.placeOf(p, string);
			return { pattern, at, weight, dimension: action.dimensionOfPart(p, pattern) };
		});
	return {
		place,
		count: distinct.length,
		products: distinct.flatMap((u) => distinct.map((v) => placed(party.adjointProduct(u, v))))
	};
}

/** Pattern of a whole word and its place in the pattern's vectors. */
export function placeOfWord(
	parties: readonly CentredStrings[],
	action: RelabellingAction,
	word: Word
): { pattern: Pattern; at: number } {
	let at = 0;
	const pattern = parties.map(({ strings }, p) => {
		const placed = action.placeOf(p, strings.numberOf(word[p] ?? []));
		at = at * action.dimensionOfPart(p, placed.pattern) + placed.at;
		return placed.pattern;
	});
	return { pattern, at };
}
