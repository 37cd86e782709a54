import { FIELD_WORD, IDS } from '../claims/history';
import { textOf, type Recorded } from './recorded';

export interface ChangedField {
	/** `Value`. */
	readonly word: string;
	readonly was: string;
	readonly is: string;
	/** Both fit into a sentence, and are words or figures. */
	readonly short: boolean;
}

const SHORT = 40;

/** What an edit changed of a claim, in the words of its form. */
export function changedClaimFields(before: Recorded, after: Recorded): readonly ChangedField[] {
	const seen = new Set<string>();
	return Object.entries(FIELD_WORD).flatMap(([field, word]) => {
		const [was, is] = [textOf(before, field), textOf(after, field)];
		if (was === is || seen.has(word)) return [];
		seen.add(word);
		const fits = was !== '' && is !== '' && was.length <= SHORT && is.length <= SHORT;
		return [{ word, was, is, short: fits && !IDS.has(field) }];
	});
}
