import { LONGEST_COMMENT } from '../../ledger/comments';
import { isWithinBudget } from './markup-budget';

/** Whether a text is read as Markdown at all; a longer or denser one is shown as typed. */
export function isReadable(text: string): boolean {
	return text.length <= LONGEST_COMMENT && isWithinBudget(text);
}
