import type { Word } from './moment-words';
import { PartyStrings } from './party-strings';

/** One party's share of the products u^dagger v of a list of words. */
export interface PartyProducts {
	readonly strings: PartyStrings;
	/** Number of the party's string in each word, and how many different ones there are. */
	readonly place: Int32Array;
	/** The different strings, by those numbers. */
	readonly distinct: readonly number[];
	/** `table[place of u * distinct.length + place of v]`: the string of the product, -1 for zero. */
	readonly table: Int32Array;
	/** A word's key is the sum over the parties of stride * string. */
	readonly stride: number;
}

/** @throws RangeError when the keys don't fit a double. */
export function wordProducts(
	inputs: readonly (readonly number[])[],
	words: readonly Word[]
): PartyProducts[] {
	let stride = 1;
	return inputs.map((inputsOfLetters, party) => {
		const strings = new PartyStrings(inputsOfLetters);
		const distinct: number[] = [];
		const placeOf = new Map<number, number>();
		const place = Int32Array.from(words, (word) => {
			const id = strings.numberOf(word[party] ?? []);
			const known = placeOf.get(id);
			if (known !== undefined) return known;
			placeOf.set(id, distinct.length);
			distinct.push(id);
			return distinct.length - 1;
		});
		const table = new Int32Array(distinct.length ** 2);
		distinct.forEach((u, i) =>
			distinct.forEach((v, j) => {
				table[i * distinct.length + j] = strings.adjointProduct(u, v);
			})
		);
		const own = stride;
		stride *= strings.count;
		if (stride > Number.MAX_SAFE_INTEGER) throw new RangeError('too many words to number');
		return { strings, place, distinct, table, stride: own };
	});
}
