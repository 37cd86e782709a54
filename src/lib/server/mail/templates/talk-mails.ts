import { plainText } from '../../markdown/plain-text';
import type { NotificationFacts } from '../../services/notifications/notification-facts';
import { notificationText, placeOf } from '../../services/notifications/notification-text';
import { claimName, claimRows } from './claim-parts';
import type { MailBody } from './verdict-mails';

export function commentBody(facts: NotificationFacts): MailBody | null {
	const { kind, comment, claim } = facts;
	if (!comment || comment.removed) return null;
	const who = facts.actor ?? 'Somebody';
	const place = placeOf(facts);
	const mention = kind === 'mention';
	return {
		subject: mention ? `${who} mentions you on ${place}` : `${who} commented on ${place}`,
		tag: { text: mention ? 'Mention' : 'Comment', tone: 'plain' },
		heading: mention ? `${who} mentions you on ${place}` : `${who} commented on ${place}`,
		paragraphs: [],
		quote: { title: who, text: plainText(comment.body) },
		facts: claimRows(claim),
		actionLabel: 'Read and answer'
	};
}

export function transcriptionBody(facts: NotificationFacts): MailBody | null {
	const { claim } = facts;
	if (!claim) return null;
	return {
		subject: `Compared with its paper: ${claimName(claim)}`,
		tag: { text: 'Transcription', tone: 'plain' },
		heading: claim.title,
		paragraphs: [notificationText(facts).text],
		quote: facts.text.trim() ? { title: 'What was found', text: plainText(facts.text) } : null,
		facts: claimRows(claim),
		actionLabel: `Open claim ${claim.number}`
	};
}

export function proposedBody(facts: NotificationFacts): MailBody | null {
	const { claim } = facts;
	if (!claim) return null;
	return {
		subject: `Proposed for publication: ${claimName(claim)}`,
		tag: { text: 'Publication', tone: 'plain' },
		heading: claim.title,
		paragraphs: [
			notificationText(facts).text,
			'A maintainer publishes it on its page. A discrepancy also needs a second person who compared it with its paper.'
		],
		facts: claimRows(claim),
		actionLabel: `Open claim ${claim.number}`
	};
}

export function authorMessageBody(facts: NotificationFacts): MailBody | null {
	const { message, claim } = facts;
	if (!message) return null;
	return {
		subject: `An author answers: ${claimName(claim)}`,
		tag: { text: 'Message from an author', tone: 'open' },
		heading: claim ? claim.title : 'A published claim',
		paragraphs: [
			`${message.name} <${message.email}> wrote about the published claim. Nobody has verified the name or the address.`
		],
		quote: { title: 'The message', text: plainText(message.message) },
		facts: claimRows(claim),
		actionLabel: claim ? `Open claim ${claim.number}` : 'Open the group'
	};
}
