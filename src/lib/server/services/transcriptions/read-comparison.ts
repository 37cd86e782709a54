import { COMPARED, type Compared } from '../../../ledger/comparison';
import { ServiceError, type FieldIssue } from '../../errors';

export interface Comparison extends Readonly<Record<Compared, boolean>> {
	/** What is wrong, where something is. */
	readonly note: string;
}

type Answer = '' | 'yes' | 'no';

const UNANSWERED: Readonly<Record<Compared, string>> = {
	valueMatches: 'Say whether the value is the paper’s.',
	locatorMatches: 'Say whether it stands there in the paper.',
	inequalityMatches: 'Say whether it is the paper’s inequality and quantity.'
};

const SAY_WHAT = 'Say what is wrong, so that it can be put right.';

/** Where something is wrong, words have to say what. @throws ServiceError invalid */
export function requireNote(comparison: Comparison, noteField = 'note'): void {
	if (COMPARED.every((part) => comparison[part]) || comparison.note.trim()) return;
	throw new ServiceError('invalid', SAY_WHAT, [{ field: noteField, message: SAY_WHAT }]);
}

/**
 * The answers of a form as a comparison: all three given, and a note where one is no.
 * @param noteField the form's name for the note
 * @throws ServiceError invalid, with an issue per field
 */
export function readComparison(
	answers: Readonly<Record<Compared, Answer>>,
	note: string,
	noteField = 'note'
): Comparison {
	const issues: FieldIssue[] = COMPARED.filter((field) => answers[field] === '').map((field) => ({
		field,
		message: UNANSWERED[field]
	}));
	if (COMPARED.some((field) => answers[field] === 'no') && !note.trim())
		issues.push({ field: noteField, message: SAY_WHAT });
	const [first] = issues;
	if (first) throw new ServiceError('invalid', first.message, issues);
	return {
		valueMatches: answers.valueMatches === 'yes',
		locatorMatches: answers.locatorMatches === 'yes',
		inequalityMatches: answers.inequalityMatches === 'yes',
		note: note.trim()
	};
}
