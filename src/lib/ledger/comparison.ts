import { listed } from './listed';

/** What is compared of a claim with its paper, in the order it is asked and told. */
export const COMPARED = ['valueMatches', 'locatorMatches', 'inequalityMatches'] as const;
export type Compared = (typeof COMPARED)[number];

export const COMPARED_WORDS: Readonly<Record<Compared, string>> = {
	valueMatches: 'value',
	locatorMatches: 'locator',
	inequalityMatches: 'inequality'
};

/** What lists say of a claim whose newest comparison found something not as in the paper. */
export const ENTRY_DIFFERS = 'entry differs from the paper';

/**
 * The comparison by which the entry differs from its paper; null when none that counts, or the
 * newest of them, finds anything wrong.
 * @param checks newest first
 */
export function disputing<T extends Readonly<Record<Compared, boolean>> & { current: boolean }>(
	checks: readonly T[]
): T | null {
	const latest = checks.find(({ current }) => current);
	return latest && COMPARED.some((part) => !latest[part]) ? latest : null;
}

/** `As in the paper: value, locator and inequality.` or `Not as in the paper: value.` */
export function comparisonWords(found: Readonly<Record<Compared, boolean>>): string {
	const wrong = COMPARED.filter((part) => !found[part]).map((part) => COMPARED_WORDS[part]);
	if (wrong.length === 0) return 'As in the paper: value, locator and inequality.';
	return `Not as in the paper: ${listed(wrong)}.`;
}
