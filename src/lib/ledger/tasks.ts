/** What a reproduction task asks for. */
export const TASK_KINDS = [
	'recompute',
	'check-derivation',
	'find-code',
	'ask-authors',
	'confirm-transcription',
	'other'
] as const;
export type TaskKind = (typeof TASK_KINDS)[number];

export const TASK_KIND_LABELS: Readonly<Record<TaskKind, string>> = {
	recompute: 'Recompute elsewhere',
	'check-derivation': 'Check the derivation',
	'find-code': 'Find the code',
	'ask-authors': 'Ask the authors',
	'confirm-transcription': 'Confirm the transcription',
	other: 'Other'
};

/**
 * `open`: nobody has it; `assigned`: somebody has it and has not begun; `returned`: sent back to
 * whoever has it, with a reason. `accepted` and `cancelled` are its ends; an accepted one is
 * returned when a certificate turns out to exclude what was found.
 */
export const TASK_STATES = [
	'open',
	'assigned',
	'in-progress',
	'submitted',
	'returned',
	'accepted',
	'cancelled'
] as const;
export type TaskState = (typeof TASK_STATES)[number];

export const TASK_STATE_LABELS: Readonly<Record<TaskState, string>> = {
	open: 'Open to all',
	assigned: 'Assigned',
	'in-progress': 'In progress',
	submitted: 'Submitted',
	returned: 'Returned',
	accepted: 'Accepted',
	cancelled: 'Cancelled'
};

/** States in which something remains to be done. */
export const ACTIVE_TASK_STATES = [
	'open',
	'assigned',
	'in-progress',
	'submitted',
	'returned'
] as const satisfies readonly TaskState[];

export function isActiveTask(state: TaskState): boolean {
	return ACTIVE_TASK_STATES.some((active) => active === state);
}

/** Whether it waits for whoever has it or takes it; what is submitted waits for somebody else. */
export function isToDo(state: TaskState): boolean {
	return isActiveTask(state) && state !== 'submitted';
}

/** What a list of tasks may be narrowed to; `active`: all that are neither accepted nor cancelled. */
export const TASK_STATE_FILTERS = ['active', 'all', ...TASK_STATES] as const;
export type TaskStateFilter = (typeof TASK_STATE_FILTERS)[number];

/** How a submission answers its task. */
export const SUBMISSION_KINDS = [
	/** A value found elsewhere, with the program or derivation it came from. */
	'value',
	/** A strategy or certificate in the problem format, judged by the check. */
	'certificate',
	/** The claim compared with the paper. */
	'transcription',
	/** Words and files only: code found, an answer by the authors. */
	'statement'
] as const;
export type SubmissionKind = (typeof SUBMISSION_KINDS)[number];

/** `contradicted`: accepted, then excluded by a certificate. */
export const SUBMISSION_STATES = ['waiting', 'accepted', 'returned', 'contradicted'] as const;
export type SubmissionState = (typeof SUBMISSION_STATES)[number];

/**
 * Days before the due date at which a reminder goes out: time enough to still do a small task.
 * Common practice, no source.
 */
export const DUE_SOON_DAYS = 3;

/** Further ahead than any reading group plans: beyond it a date is a slip of the keys (2062 for 2026). */
export const DUE_WITHIN_YEARS = 5;

/** The last day that a task may be due on, when opened today. */
export function lastDueDay(today: string): string {
	const year = String(Number(today.slice(0, 4)) + DUE_WITHIN_YEARS);
	// What 29 February becomes in a year without it.
	return `${year.padStart(4, '0')}${today.slice(4)}`.replace(/-02-29$/, '-02-28');
}

/** Dates without a time, `YYYY-MM-DD`: something is overdue the day after, in UTC. */
export function isOverdue(dueOn: string | null, state: TaskState, today: string): boolean {
	return dueOn !== null && dueOn < today && isToDo(state);
}

/** `2026-12-14` of a time, in UTC. */
export function dayOf(time: Date): string {
	return time.toISOString().slice(0, 10);
}
