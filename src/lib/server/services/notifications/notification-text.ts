import { dayWords } from '../../../ledger/day-words';
import { TASK_KIND_LABELS } from '../../../ledger/tasks';
import { plainText } from '../../markdown/plain-text';
import type { NotificationFacts } from './notification-facts';

export interface NotificationText {
	/** One sentence: who did what. */
	readonly text: string;
	/** What it is about, or the words of the person who did it; may be empty. */
	readonly detail: string;
	/** Path of the page it leads to. */
	readonly href: string;
}

const LONGEST_DETAIL = 300;

/** The words for a notification, for the list, for mails and for the digest alike. */
export function notificationText(facts: NotificationFacts): NotificationText {
	return { text: sentence(facts), detail: shorten(detail(facts)), href: addressOf(facts) };
}

function sentence(facts: NotificationFacts): string {
	const { kind, claim, task, message, text } = facts;
	const who = facts.actor ?? 'Somebody';
	const theClaim = claim ? `claim ${claim.number}` : 'a claim';
	const theTask = task ? `task ${task.number}` : 'a task';
	const own = task !== null && task.assigneeId === facts.recipient.id;
	switch (kind) {
		case 'discrepancy':
			return `The recomputation of ${theClaim} disagrees with its printed value.`;
		case 'settled':
			return `${capital(theClaim)} agrees now, after it disagreed.`;
		case 'transcription':
			return `${who} compared ${theClaim} with its paper.`;
		case 'claim-proposed':
			return `${who} proposes ${theClaim} for publication.`;
		case 'task-assigned':
			if (isBundle(facts)) return `${who} assigned ${text.split('\n').length} tasks to you.`;
			return `${who} assigned ${theTask} on ${theClaim} to you.`;
		case 'task-submitted':
			return `${who} submitted ${theTask} on ${theClaim}.`;
		case 'task-returned':
			return facts.actor
				? `${who} returned ${theTask} on ${theClaim}.`
				: `A certificate contradicts what was found for ${theTask} on ${theClaim}.`;
		case 'task-accepted':
			return `${who} accepted ${theTask} on ${theClaim}.`;
		case 'task-cancelled':
			return task?.state === 'cancelled'
				? `${who} cancelled ${theTask} on ${theClaim}.`
				: `${who} took back ${theTask} on ${theClaim}.`;
		case 'task-due-soon':
			return `${capital(own ? `your ${theTask}` : theTask)} on ${theClaim} is due on ${dayWords(text)}.`;
		case 'task-overdue':
			return `${capital(own ? `your ${theTask}` : theTask)} on ${theClaim} was due on ${dayWords(text)}.`;
		case 'mention':
			return `${who} mentions you in a comment on ${placeOf(facts)}.`;
		case 'comment':
			return `${who} commented on ${placeOf(facts)}.`;
		case 'author-message':
			return `${message?.name ?? 'An author'} wrote about the published ${theClaim}.`;
	}
}

/** Several tasks given to one person in one go: their list is its text, a line for each. */
export function isBundle({ kind, task, text }: NotificationFacts): boolean {
	return kind === 'task-assigned' && task === null && text !== '';
}

/** What a comment is on: `claim 7`, `task 4`, `CHSH`. */
export function placeOf({ claim, task, comment }: NotificationFacts): string {
	if (comment?.subject === 'inequality') return comment.inequality ?? 'an inequality';
	if (comment?.subject === 'task' || (!claim && task))
		return task ? `task ${task.number}` : 'a task';
	return claim ? `claim ${claim.number}` : 'a claim';
}

function detail(facts: NotificationFacts): string {
	const { kind, claim, task, comment, message, text } = facts;
	if (isBundle(facts)) return `${text.split('\n').join('; ')}.`;
	const about = claim ? claim.title : '';
	const asked = task ? `${TASK_KIND_LABELS[task.kind]}: ${about}` : about;
	switch (kind) {
		case 'mention':
		case 'comment':
			return comment === null || comment.removed
				? 'The comment was removed.'
				: plainText(comment.body);
		case 'author-message':
			return plainText(message?.message ?? '');
		case 'task-returned':
		case 'task-cancelled':
		case 'transcription':
			return plainText(text) || about;
		case 'task-due-soon':
		case 'task-overdue':
			// Its text is the date, which the sentence says.
			return asked;
		case 'task-assigned':
		case 'task-submitted':
		case 'task-accepted':
			return plainText(text) || asked;
		default:
			return about;
	}
}

function addressOf(facts: NotificationFacts): string {
	const { kind, group, claim, task, comment } = facts;
	const base = `/g/${group.slug}`;
	if (isBundle(facts)) return `${base}/tasks?assignee=me`;
	const anchor = comment ? `#comment-${comment.id}` : '';
	if (comment?.subject === 'inequality') {
		return `${base}/inequalities/${encodeURIComponent(comment.subjectId)}${anchor}`;
	}
	const onTask = comment ? comment.subject === 'task' : kind.startsWith('task-');
	if (task && onTask) return `${base}/tasks/${task.number}${anchor}`;
	return claim ? `${base}/claims/${claim.number}${anchor}` : base;
}

/** The path for a mail: the page that opens marks this news as read. */
export function mailedAddress(facts: NotificationFacts): string {
	const [path = '', anchor] = addressOf(facts).split('#');
	return `${path}${path.includes('?') ? '&' : '?'}news=${facts.id}${anchor ? `#${anchor}` : ''}`;
}

function shorten(text: string): string {
	const line = text.replace(/\s+/g, ' ').trim();
	const characters = Array.from(line);
	if (characters.length <= LONGEST_DETAIL) return line;
	return `${characters.slice(0, LONGEST_DETAIL - 1).join('')}…`;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
