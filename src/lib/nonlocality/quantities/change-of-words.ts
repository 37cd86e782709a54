import type { CentredStrings, Combination } from './centred-strings';
import type { Word } from './moment-words';

/**
 * The square matrix that writes words of one kind of letters in words of the other kind, row-major:
 * a product over the parties.
 * @returns null when a word with letters left out is not among the words.
 */
export function changeOfWords(
	parties: readonly CentredStrings[],
	words: readonly Word[],
	kind: 'inProjectors' | 'inCentred'
): Float64Array | null {
	const n = words.length;
	const numberOf = new Map<string, number>();
	const strings = words.map((word) =>
		parties.map(({ strings: own }, p) => own.numberOf(word[p] ?? []))
	);
	strings.forEach((ids, i) => numberOf.set(ids.join(), i));
	const known = parties.map(() => new Map<number, Combination>());
	const matrix = new Float64Array(n * n);
	for (const [i, ids] of strings.entries()) {
		let sums: { ids: readonly number[]; weight: number }[] = [{ ids: [], weight: 1 }];
		ids.forEach((id, p) => {
			const combination = known[p]?.get(id) ?? parties[p]?.[kind](id) ?? [];
			known[p]?.set(id, combination);
			sums = sums.flatMap(({ ids: before, weight }) =>
				combination.map(([string, factor]) => ({
					ids: [...before, string],
					weight: weight * factor
				}))
			);
		});
		for (const { ids: target, weight } of sums) {
			const j = numberOf.get(target.join());
			if (j === undefined) return null;
			matrix[i * n + j] = (matrix[i * n + j] ?? 0) + weight;
		}
	}
	return matrix;
}
