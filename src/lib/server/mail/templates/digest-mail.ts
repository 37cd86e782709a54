import { NOTIFICATION_KINDS, type NotificationKind } from '../../../ledger/notifications';
import type { NotificationFacts } from '../../services/notifications/notification-facts';
import { mailedAddress, notificationText } from '../../services/notifications/notification-text';
import type { MailContent, MailSection } from '../mail-content';
import { footerFor } from './mail-links';

/** A digest stays readable; the rest is on the page of what is new. */
export const MOST_IN_DIGEST = 60;

const KIND_TITLES: Readonly<Record<NotificationKind, string>> = {
	discrepancy: 'Discrepancies',
	settled: 'Agreement after a discrepancy',
	transcription: 'Compared with the paper',
	'task-assigned': 'Tasks assigned to you',
	'task-submitted': 'Submissions that wait for a decision',
	'task-returned': 'Submissions returned',
	'task-accepted': 'Submissions accepted',
	'task-cancelled': 'Tasks cancelled or taken back',
	'task-due-soon': 'Tasks due soon',
	'task-overdue': 'Tasks overdue',
	mention: 'Mentions',
	comment: 'Comments',
	'claim-proposed': 'Proposed for publication',
	'author-message': 'Messages from authors'
};

/**
 * What waited for the day's digest, group by group and kind by kind.
 * @param all newest first, of one person; null when there is nothing to tell
 */
export function digestMail(all: readonly NotificationFacts[], origin: string): MailContent | null {
	const [first] = all;
	if (!first) return null;
	const shown = all.slice(0, MOST_IN_DIGEST);
	const more = all.length - shown.length;
	const things = all.length === 1 ? '1 thing is new' : `${all.length} things are new`;
	const names = [...new Set(all.map(({ group }) => group.name))];
	return {
		subject: `${things} in ${names.length === 1 ? first.group.name : `${names.length} groups`}`,
		tag: { text: 'Daily digest', tone: 'plain' },
		heading: `${things} for you`,
		paragraphs:
			more > 0 ? [`The newest ${shown.length} are below, and ${more} more on the page.`] : [],
		sections: sectionsOf(shown, origin),
		action: { label: 'See what is new', address: `${origin}/news` },
		footer: footerFor(
			origin,
			first.recipient.id,
			'digest',
			'You get this because you chose a daily digest for these kinds of news, or left the choice as it was.'
		)
	};
}

function sectionsOf(facts: readonly NotificationFacts[], origin: string): MailSection[] {
	const groups = new Map<string, NotificationFacts[]>();
	for (const each of facts) {
		const known = groups.get(each.group.id);
		if (known) known.push(each);
		else groups.set(each.group.id, [each]);
	}
	return [...groups.values()].map((ofGroup) => ({
		title: ofGroup[0]?.group.name ?? '',
		parts: NOTIFICATION_KINDS.map((kind) => ({
			title: KIND_TITLES[kind],
			items: ofGroup
				.filter((each) => each.kind === kind)
				.map((each) => {
					const { text, detail } = notificationText(each);
					return { text, detail, address: origin + mailedAddress(each) };
				})
		})).filter(({ items }) => items.length > 0)
	}));
}
