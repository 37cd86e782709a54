/** What a person is told of. The order is the one of the choices on the account page. */
export const NOTIFICATION_KINDS = [
	'discrepancy',
	'settled',
	'transcription',
	'task-assigned',
	'task-submitted',
	'task-returned',
	'task-accepted',
	'task-cancelled',
	'task-due-soon',
	'task-overdue',
	'mention',
	'comment',
	'claim-proposed',
	'author-message'
] as const;
export type NotificationKind = (typeof NOTIFICATION_KINDS)[number];

/** By mail at once, in the daily digest, or not by mail; the in-app list has all of them. */
export const DELIVERIES = ['at-once', 'daily', 'never'] as const;
export type Delivery = (typeof DELIVERIES)[number];

/** Until a person chooses otherwise: at once what calls for an answer, the rest once a day. */
export const DEFAULT_DELIVERY: Readonly<Record<NotificationKind, Delivery>> = {
	discrepancy: 'at-once',
	settled: 'at-once',
	transcription: 'at-once',
	'task-assigned': 'at-once',
	'task-submitted': 'at-once',
	'task-returned': 'at-once',
	'task-accepted': 'at-once',
	'task-cancelled': 'at-once',
	'task-due-soon': 'at-once',
	'task-overdue': 'at-once',
	mention: 'at-once',
	comment: 'daily',
	'claim-proposed': 'daily',
	'author-message': 'at-once'
};

export const NOTIFICATION_LABELS: Readonly<Record<NotificationKind, string>> = {
	discrepancy: 'A recomputation disagrees with a claim',
	settled: 'A claim agrees after it disagreed',
	transcription: 'Somebody compared a claim of mine with its paper',
	'task-assigned': 'A task is assigned to me',
	'task-submitted': 'A submission waits to be accepted',
	'task-returned': 'A submission of mine is returned',
	'task-accepted': 'A submission of mine is accepted',
	'task-cancelled': 'A task of mine is cancelled or taken back',
	'task-due-soon': 'A task of mine is due soon',
	'task-overdue': 'A task of mine is overdue',
	mention: 'Somebody mentions me',
	comment: 'Somebody comments on a claim or task of mine',
	'claim-proposed': 'A claim is proposed for publication',
	'author-message': 'An author answers a published claim'
};

/** The kinds of mail; the last two are no notifications a person could turn off one by one. */
export const MAIL_KINDS = [...NOTIFICATION_KINDS, 'invitation', 'digest'] as const;
export type MailKind = (typeof MAIL_KINDS)[number];
