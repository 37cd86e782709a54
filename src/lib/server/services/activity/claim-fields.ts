import type { ClaimInput } from '../../../schemas/claim-input';
import { textOf, type Recorded } from './recorded';

/** The words of the claim's form. */
export const FIELD_WORD: Partial<Record<keyof ClaimInput, string>> = {
	printed: 'Value',
	relation: 'Relation',
	reading: 'How it is printed',
	quantity: 'Quantity',
	level: 'Level',
	expression: 'Expression',
	table: 'Table',
	locator: 'Locator',
	method: 'Method',
	note: 'Note',
	sense: 'Sense',
	dimension: 'Dimension',
	family: 'Family',
	familyParameter: 'Parameter of the family',
	described: 'Subject',
	inequalityId: 'Inequality',
	// The row of the paper; however it was named in the form, as known or pasted, it is one row.
	referenceId: 'Paper'
};

/** Not words for a person. */
const IDS: ReadonlySet<string> = new Set(['referenceId', 'inequalityId']);

export interface ChangedField {
	readonly field: string;
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
		return [{ field, word, was, is, short: fits && !IDS.has(field) }];
	});
}
