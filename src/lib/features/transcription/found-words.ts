import type { TranscriptionCheckView } from '../../schemas/task-views';

type Found = Pick<TranscriptionCheckView, 'valueMatches' | 'locatorMatches' | 'inequalityMatches'>;

const PARTS = [
	['valueMatches', 'value'],
	['locatorMatches', 'locator'],
	['inequalityMatches', 'inequality']
] as const;

/** `As in the paper: value, locator and inequality.` or `Not as in the paper: value.` */
export function foundWords(found: Found): string {
	const wrong = PARTS.filter(([key]) => !found[key]).map(([, word]) => word);
	if (wrong.length === 0) return 'As in the paper: value, locator and inequality.';
	const last = wrong.at(-1) ?? '';
	const list = wrong.length === 1 ? last : `${wrong.slice(0, -1).join(', ')} and ${last}`;
	return `Not as in the paper: ${list}.`;
}
