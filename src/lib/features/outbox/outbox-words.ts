import type { MailKind } from '../../ledger/notifications';
import { NOTIFICATION_LABELS } from '../../ledger/notifications';
import type { OutboxRow } from '../../schemas/talk-views';

type State = OutboxRow['state'];

/** The states of a mail in the order an administrator asks for them. */
export const OUTBOX_WORDS: readonly {
	readonly state: State;
	readonly label: string;
	readonly empty: string;
	readonly meaning: string;
}[] = [
	{
		state: 'dead',
		label: 'Dead',
		empty: 'No mail is dead',
		meaning: 'Mails that were refused for good, or ten times, will stand here.'
	},
	{
		state: 'waiting',
		label: 'Waiting',
		empty: 'No mail waits',
		meaning: 'Mails that are about to be sent, or sent again, will stand here.'
	},
	{
		state: 'sent',
		label: 'Sent',
		empty: 'No mail was sent yet',
		meaning: 'Mails that the mail server took will stand here.'
	},
	{
		state: 'dropped',
		label: 'Dropped',
		empty: 'No mail was dropped',
		meaning: 'Mails that had nothing to tell any more, or were discarded, will stand here.'
	}
];

export function outboxAddress(state: State, page = 1): string {
	const query = new URLSearchParams();
	if (state !== 'dead') query.set('state', state);
	if (page > 1) query.set('page', String(page));
	return query.size > 0 ? `/admin/mail?${query.toString()}` : '/admin/mail';
}

const MORE_KINDS: Readonly<Record<string, string>> = {
	invitation: 'Invitation',
	digest: 'Daily digest'
};

export function mailKindLabel(kind: string): string {
	return (
		MORE_KINDS[kind] ?? NOTIFICATION_LABELS[kind as Exclude<MailKind, 'invitation' | 'digest'>]
	);
}
