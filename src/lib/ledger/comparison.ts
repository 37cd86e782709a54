/** What is compared of a claim with its paper, in the order it is asked and told. */
export const COMPARED = ['valueMatches', 'locatorMatches', 'inequalityMatches'] as const;
export type Compared = (typeof COMPARED)[number];

const WORDS: Readonly<Record<Compared, string>> = {
	valueMatches: 'value',
	locatorMatches: 'locator',
	inequalityMatches: 'inequality'
};

/** `As in the paper: value, locator and inequality.` or `Not as in the paper: value.` */
export function comparisonWords(found: Readonly<Record<Compared, boolean>>): string {
	const wrong = COMPARED.filter((part) => !found[part]).map((part) => WORDS[part]);
	if (wrong.length === 0) return 'As in the paper: value, locator and inequality.';
	const last = wrong.at(-1) ?? '';
	const list = wrong.length === 1 ? last : `${wrong.slice(0, -1).join(', ')} and ${last}`;
	return `Not as in the paper: ${list}.`;
}
