import { and, asc, eq, lte } from 'drizzle-orm';
import type { MailKind } from '../../ledger/notifications';
import type { Reader } from '../db/client';
import { invitations, outbox, users } from '../db/schema';

/** Looked at again every two seconds, so that a new mail never waits for a long batch. */
const BATCH = 20;

export interface DueMail {
	readonly id: string;
	readonly kind: MailKind;
	readonly messageId: string;
	readonly attempts: number;
	readonly userId: string | null;
	readonly notificationId: string | null;
	readonly invitationId: string | null;
	readonly to: { readonly name: string; readonly address: string } | null;
}

/** What is to be sent now: first tries before further ones, then the longest waiting. */
export async function dueMails(read: Reader, now: Date): Promise<readonly DueMail[]> {
	const rows = await read
		.select({
			id: outbox.id,
			kind: outbox.kind,
			messageId: outbox.messageId,
			attempts: outbox.attempts,
			userId: outbox.userId,
			notificationId: outbox.notificationId,
			invitationId: outbox.invitationId,
			name: users.name,
			address: users.email,
			invited: invitations.email
		})
		.from(outbox)
		.leftJoin(users, eq(users.id, outbox.userId))
		.leftJoin(invitations, eq(invitations.id, outbox.invitationId))
		.where(and(eq(outbox.state, 'waiting'), lte(outbox.notBefore, now)))
		.orderBy(asc(outbox.attempts), asc(outbox.notBefore), asc(outbox.id))
		.limit(BATCH);
	return rows.map(({ name, address, invited, ...row }) => {
		const to = row.kind === 'invitation' ? invited : address;
		return { ...row, to: to ? { name: name ?? '', address: to } : null };
	});
}
