import type { NotificationKind } from '../../../ledger/notifications';

/** The end of `You get this because ...`, by kind. */
const REASONS: Readonly<Record<NotificationKind, (group: string) => string>> = {
	discrepancy: (group) => `you entered the claim or look after the ledger of ${group}`,
	settled: (group) => `you were told of the discrepancy, in ${group}`,
	transcription: (group) => `you entered or edited the claim, in ${group}`,
	'task-assigned': (group) => `the task is yours, in ${group}`,
	'task-submitted': (group) => `you can decide on submissions in ${group}`,
	'task-returned': (group) => `you submitted or accepted what was found, in ${group}`,
	'task-accepted': (group) => `you submitted the task, in ${group}`,
	'task-cancelled': (group) => `the task was yours, in ${group}`,
	'task-due-soon': (group) => `the task is yours, or you opened it and nobody has it, in ${group}`,
	'task-overdue': (group) => `the task is yours or you opened it, in ${group}`,
	mention: (group) => `somebody mentions you, in ${group}`,
	comment: (group) => `it is about something of yours or that you commented on, in ${group}`,
	'claim-proposed': (group) => `you can publish claims of ${group}`,
	'author-message': (group) => `you look after the ledger of ${group}`
};

export const whyYou = (kind: NotificationKind, group: string) =>
	`You get this because ${REASONS[kind](group)}.`;
