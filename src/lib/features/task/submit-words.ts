import type { SubmissionKind } from '../../ledger/tasks';
import { submitInput, TASK_LIMITS, type SubmitInput } from '../../schemas/task-input';
import type { SubmissionView, TaskView } from '../../schemas/task-views';
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

/** What a further try takes over from the one before it; the value and the files are new. */
type Earlier = Pick<
	SubmissionView,
	'kind' | 'relation' | 'program' | 'programVersion' | 'method' | 'comment'
>;

/** The try that the person whose task it is makes again, after it was returned. */
export function startingFrom({ submissions, assignee }: TaskView): Earlier | undefined {
	const last = submissions.at(-1);
	return last && last.by.id === assignee?.id ? last : undefined;
}

/**
 * A submission's fields as a form starts with them: what was typed before where the form came back,
 * else how the try before was made.
 */
export function submitStart(
	typed: Readonly<Record<string, string>> | undefined,
	kinds: readonly SubmissionKind[],
	earlier?: Earlier
): Record<keyof SubmitInput, string> {
	const blank: Record<keyof SubmitInput, string> = {
		...submitInput.parse({}),
		kind: kinds[0] ?? ''
	};
	if (!typed && earlier && kinds.includes(earlier.kind)) {
		const { kind, relation, program, programVersion, method, comment } = earlier;
		return { ...blank, kind, relation, program, programVersion, method, comment };
	}
	if (!typed) return blank;
	const fields = Object.entries(typed).filter(([field]) => field in blank);
	return { ...blank, ...Object.fromEntries(fields) };
}
