import type { NotificationFacts } from '../../services/notifications/notification-facts';
import { mailedAddress } from '../../services/notifications/notification-text';
import type { MailContent } from '../mail-content';
import { footerFor } from './mail-links';
import { authorMessageBody, commentBody, proposedBody, transcriptionBody } from './talk-mails';
import { taskBody } from './task-mails';
import { discrepancyBody, settledBody, type MailBody } from './verdict-mails';
import { whyYou } from './why';

/** The mail for one notification; null when the rows it was about are gone. */
export function notificationMail(facts: NotificationFacts, origin: string): MailContent | null {
	const body = bodyOf(facts);
	if (!body) return null;
	const { actionLabel: label, ...rest } = body;
	const { kind, group, recipient } = facts;
	return {
		...rest,
		action: { label, address: origin + mailedAddress(facts) },
		footer: footerFor(origin, recipient.id, kind, whyYou(kind, group.name))
	};
}

function bodyOf(facts: NotificationFacts): MailBody | null {
	switch (facts.kind) {
		case 'discrepancy':
			return discrepancyBody(facts);
		case 'settled':
			return settledBody(facts);
		case 'transcription':
			return transcriptionBody(facts);
		case 'claim-proposed':
			return proposedBody(facts);
		case 'mention':
		case 'comment':
			return commentBody(facts);
		case 'author-message':
			return authorMessageBody(facts);
		default:
			return taskBody(facts);
	}
}
