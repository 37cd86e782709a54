import { dayWords } from '../../../ledger/day-words';
import { TASK_KIND_LABELS } from '../../../ledger/tasks';
import { plainText } from '../../markdown/plain-text';
import type { NotificationFacts } from '../../services/notifications/notification-facts';
import { isBundle, notificationText } from '../../services/notifications/notification-text';
import type { Tone } from '../mail-content';
import { claimName, claimRows } from './claim-parts';
import type { MailBody } from './verdict-mails';

interface TaskWords {
	/** Begins the subject: `Task 4 returned`. */
	readonly state: string;
	readonly tone: Tone;
	/** What is to do now; empty when nothing is. */
	readonly next: string;
	/** Over the text that came with it: a reason. */
	readonly quoted?: string;
}

function wordsOf({ kind, task }: NotificationFacts): TaskWords | null {
	switch (kind) {
		case 'task-assigned':
			return {
				state: 'assigned to you',
				tone: 'plain',
				next: 'Start it on its page; hand in there what you find.'
			};
		case 'task-submitted':
			return {
				state: 'waits for a decision',
				tone: 'open',
				next: 'Accept it, or return it with a reason. Nobody accepts their own submission.'
			};
		case 'task-returned':
			return {
				state: 'returned',
				tone: 'open',
				next: 'The submission is kept on the task’s page; another one can be handed in there.',
				quoted: 'Why'
			};
		case 'task-accepted':
			return {
				state: 'accepted',
				tone: 'agreement',
				next: 'What was found counts towards the claim’s verdict where the task asked for a value.',
				quoted: 'What convinced whoever accepted it'
			};
		case 'task-cancelled':
			return {
				state: task?.state === 'cancelled' ? 'cancelled' : 'taken back',
				tone: 'plain',
				next: 'There is nothing more to do for you.',
				quoted: 'Why'
			};
		case 'task-due-soon':
			return {
				state: `due on ${dayWords(task?.dueOn ?? '')}`,
				tone: 'open',
				next: 'Hand in what you found, or give the task back if you can’t see to it.'
			};
		case 'task-overdue':
			return {
				state: `overdue since ${dayWords(task?.dueOn ?? '')}`,
				tone: 'discrepancy',
				next: 'Hand in what was found, move the date, or give the task to somebody else.'
			};
		default:
			return null;
	}
}

export function taskBody(facts: NotificationFacts): MailBody | null {
	const { task, claim } = facts;
	if (isBundle(facts)) return bundleBody(facts);
	const words = wordsOf(facts);
	if (!task || !words) return null;
	const kind = TASK_KIND_LABELS[task.kind];
	const { text, quoted } = { text: plainText(facts.text), quoted: words.quoted };
	return {
		subject: `Task ${task.number} ${words.state}: ${kind}, ${claimName(claim)}`,
		tag: { text: `Task ${task.number}: ${words.state}`, tone: words.tone },
		heading: claim ? `${kind}: ${claim.title}` : kind,
		paragraphs: [notificationText(facts).text, words.next],
		quote: quoted && text ? { title: quoted, text } : instructionsOf(facts),
		facts: [
			['Task', `${task.number}: ${kind}`],
			...(task.dueOn ? [['Due', `${dayWords(task.dueOn)} (UTC)`] as const] : []),
			...claimRows(claim)
		],
		actionLabel: `Open task ${task.number}`
	};
}

/** Several tasks that were given to one person in one go. */
function bundleBody(facts: NotificationFacts): MailBody {
	const items = facts.text.split('\n');
	return {
		subject: `${items.length} tasks are assigned to you in ${facts.group.name}`,
		tag: { text: `${items.length} tasks: assigned to you`, tone: 'plain' },
		heading: `${items.length} tasks are assigned to you`,
		paragraphs: [
			notificationText(facts).text,
			'Each has its page, with what is asked; start it and hand in there what you find.'
		],
		list: { title: 'The tasks', items },
		actionLabel: 'Open your tasks'
	};
}

/** Whoever has to do it reads what is to do. */
function instructionsOf({ kind, task }: NotificationFacts): MailBody['quote'] {
	const wanted = kind === 'task-assigned' || kind === 'task-due-soon';
	return wanted && task?.instructions
		? { title: 'Instructions', text: plainText(task.instructions) }
		: null;
}
