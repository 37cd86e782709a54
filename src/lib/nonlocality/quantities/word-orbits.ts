import type { CentredStrings } from './centred-strings';
import { placeOfWord } from './centred-moment-matrix';
import type { Word } from './moment-words';
import type { Pattern, RelabellingAction } from './relabelling-action';

/** Words that relabellings mix among each other: those of some patterns. */
export interface WordOrbit {
	/** Numbers of the words; a vector of the orbit lists their entries in this order. */
	readonly words: Int32Array;
	readonly patterns: readonly {
		readonly pattern: Pattern;
		readonly from: number;
		readonly to: number;
	}[];
	/** Where the image of each pattern's part of a vector goes, by element and pattern. */
	readonly targets: readonly (readonly number[])[];
}

/** @returns null when the words are not closed under the relabellings. */
export function wordOrbits(
	parties: readonly CentredStrings[],
	words: readonly Word[],
	action: RelabellingAction
): WordOrbit[] | null {
	const found = new Map<number, { pattern: Pattern; words: Int32Array }>();
	words.forEach((word, i) => {
		const { pattern, at } = placeOfWord(parties, action, word);
		const key = action.keyOf(pattern);
		let known = found.get(key);
		if (!known) {
			known = { pattern, words: new Int32Array(action.dimension(pattern)).fill(-1) };
			found.set(key, known);
		}
		known.words[at] = i;
	});
	const orbits: WordOrbit[] = [];
	const done = new Set<number>();
	for (const [key, { pattern }] of found) {
		if (done.has(key)) continue;
		const members = new Map<number, { pattern: Pattern; from: number; to: number }>();
		const numbers: number[] = [];
		const images = (from: Pattern) =>
			Array.from({ length: action.order }, (_, g) => action.image(g, from, false));
		for (const image of images(pattern)) {
			const imageKey = action.keyOf(image);
			if (members.has(imageKey)) continue;
			const own = found.get(imageKey);
			if (!own || own.words.includes(-1)) return null;
			members.set(imageKey, {
				pattern: image,
				from: numbers.length,
				to: numbers.length + own.words.length
			});
			numbers.push(...own.words);
			done.add(imageKey);
		}
		const patterns = [...members.values()];
		const targetsOf = patterns.map((member) =>
			images(member.pattern).map((image) => members.get(action.keyOf(image))?.from ?? 0)
		);
		orbits.push({
			words: Int32Array.from(numbers),
			patterns,
			targets: Array.from({ length: action.order }, (_, g) => targetsOf.map((list) => list[g] ?? 0))
		});
	}
	return orbits;
}

/**
 * Writes the images of vectors of an orbit.
 * @param vectors row-major, the orbit's words by `columns`.
 */
export function moveVectors(
	action: RelabellingAction,
	orbit: WordOrbit,
	element: number,
	vectors: Float64Array,
	columns: number,
	images: Float64Array
): void {
	orbit.patterns.forEach(({ pattern, from, to }, k) => {
		const part = vectors.subarray(from * columns, to * columns);
		const moved = action.apply(element, pattern, part, false, columns);
		images.set(moved, (orbit.targets[element]?.[k] ?? 0) * columns);
	});
}
