import type { NotificationFacts } from '../../services/notifications/notification-facts';
import type { MailContent } from '../mail-content';
import { claimRowsWithoutValue, comparedFigures } from './claim-parts';

/** What a template fills in; the rest of a mail is the same for every kind. */
export type MailBody = Omit<MailContent, 'action' | 'footer'> & { readonly actionLabel: string };

const MOST_DIAGNOSES = 3;

export function discrepancyBody({ claim }: NotificationFacts): MailBody | null {
	if (!claim) return null;
	return {
		subject: `Discrepancy: ${claim.title}, claim ${claim.number}`,
		tag: { text: '≠ Discrepancy', tone: 'discrepancy' },
		heading: `${claim.title}: does not reproduce as entered`,
		figures: comparedFigures(claim),
		paragraphs: [claim.verdict.reason],
		list: {
			title: 'It would agree if',
			items: claim.verdict.diagnosis.slice(0, MOST_DIAGNOSES).map(({ text }) => text)
		},
		facts: claimRowsWithoutValue(claim),
		actionLabel: `Open claim ${claim.number}`
	};
}

export function settledBody({ claim }: NotificationFacts): MailBody | null {
	if (!claim) return null;
	return {
		subject: `Agreement after a discrepancy: ${claim.title}, claim ${claim.number}`,
		tag: { text: '≈ Agreement', tone: 'agreement' },
		heading: `${claim.title}: agrees now`,
		figures: comparedFigures(claim),
		paragraphs: [
			`Claim ${claim.number} was a discrepancy when you were last told of it. It agrees now.`,
			claim.verdict.reason
		],
		facts: claimRowsWithoutValue(claim),
		actionLabel: `Open claim ${claim.number}`
	};
}
