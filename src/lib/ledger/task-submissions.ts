import type { SubmissionKind, TaskKind } from './tasks';

/** What a submission may hold; the first is offered first. */
export const SUBMISSION_KINDS_OF: Readonly<Record<TaskKind, readonly SubmissionKind[]>> = {
	recompute: ['value', 'certificate', 'statement'],
	'check-derivation': ['value', 'certificate', 'statement'],
	'find-code': ['statement', 'value', 'certificate'],
	'ask-authors': ['statement', 'value', 'certificate'],
	'confirm-transcription': ['transcription'],
	other: ['value', 'certificate', 'statement']
};
