import type { SubmissionKind } from '../../ledger/tasks';
import { submitInput, TASK_LIMITS, type SubmitInput } from '../../schemas/task-input';
import { sizeWords } from './task-words';

export const SUBMISSION_LABELS: Readonly<Record<SubmissionKind, string>> = {
	value: 'A value found',
	certificate: 'A strategy or certificate',
	transcription: 'Compared with the paper',
	statement: 'Words and files'
};

export const FILES_HINT =
	`At most ${TASK_LIMITS.files} files of ${sizeWords(TASK_LIMITS.fileBytes)} each: ` +
	'programs, logs, data, PDF, pictures, archives. Others get them as downloads.';

/** A submission's fields as a form starts with them; what was typed before comes first. */
export function submitStart(
	typed: Readonly<Record<string, string>> | undefined,
	kinds: readonly SubmissionKind[]
): Record<keyof SubmitInput, string> {
	const blank: Record<keyof SubmitInput, string> = {
		...submitInput.parse({}),
		kind: kinds[0] ?? ''
	};
	if (!typed) return blank;
	const fields = Object.entries(typed).filter(([field]) => field in blank);
	return { ...blank, ...Object.fromEntries(fields) };
}
