import { isToDo } from '../../../ledger/tasks';
import { mailWorthy } from '../../../ledger/verdict';
import type { NotificationFacts, TaskFacts } from './notification-facts';
import { isBundle } from './notification-text';

/**
 * Whether a notification still has something to tell that person: the claim stands, the task is
 * still theirs, the comment was not taken back. Asked when a mail or digest is made, which may be
 * hours after the event; the list in the product keeps what was.
 */
export function isStillTrue(facts: NotificationFacts): boolean {
	const { kind, claim, task, comment, message, recipient } = facts;
	if (facts.delivery === 'never') return false;
	switch (kind) {
		case 'discrepancy':
			return claim !== null && claim.state !== 'withdrawn' && mailWorthy(claim.verdict);
		case 'settled':
			return claim !== null && claim.state !== 'withdrawn' && claim.verdict.status === 'agreement';
		case 'transcription':
			return claim !== null && claim.state !== 'withdrawn';
		case 'claim-proposed':
			return claim !== null && claim.state !== 'withdrawn' && claim.visibility === 'proposed';
		case 'task-assigned':
			return (
				isBundle(facts) || (task !== null && isToDo(task.state) && task.assigneeId === recipient.id)
			);
		case 'task-submitted':
			return task?.state === 'submitted';
		case 'task-returned':
			return task?.state === 'returned';
		case 'task-accepted':
			return task?.state === 'accepted';
		case 'task-cancelled':
			return task !== null && (task.state === 'cancelled' || task.assigneeId !== recipient.id);
		case 'task-due-soon':
		case 'task-overdue':
			return task !== null && isDue(facts, task);
		case 'mention':
			return comment !== null && !comment.removed && comment.mentions;
		case 'comment':
			return comment !== null && !comment.removed;
		case 'author-message':
			return message !== null && !message.handled;
	}
}

/** Still on the date the reminder is about, and still this person's to see to. */
function isDue({ text, recipient }: NotificationFacts, task: TaskFacts): boolean {
	const theirs = task.assigneeId === recipient.id || task.createdBy === recipient.id;
	return isToDo(task.state) && task.dueOn === text && theirs;
}
