import { and, desc, eq, isNull } from 'drizzle-orm';
import { z } from 'zod';
import type { Reader } from '../db/client';
import { derivedToken } from '../derived-token';
import { groups, invitations, notifications, users } from '../db/schema';
import {
	factsOf,
	selectFacts,
	type NotificationFacts
} from '../services/notifications/notification-facts';
import { isStillTrue } from '../services/notifications/still-true';
import type { DueMail } from './due-mails';
import { renderMail } from './frame';
import type { RenderedMail } from './mail-content';
import { mailHeaders, type MailHeaders } from './mail-headers';
import { digestMail } from './templates/digest-mail';
import { invitationMail } from './templates/invitation-mail';
import { notificationMail } from './templates/notification-mail';

export interface DueContent extends RenderedMail {
	readonly headers: MailHeaders;
	readonly replyTo?: string;
}

/** From the rows as they are now; null when there is nothing to tell that person any more. */
export async function renderDue(
	read: Reader,
	row: DueMail,
	origin: string,
	now: Date
): Promise<DueContent | null> {
	if (row.kind === 'invitation') return renderInvitation(read, row, origin, now);
	if (row.kind === 'digest') return renderDigest(read, row, origin);
	if (row.notificationId === null) return null;
	const [found] = await selectFacts(read).where(eq(notifications.id, row.notificationId));
	if (!found) return null;
	const facts = factsOf(found);
	const content = isStillTrue(facts) ? notificationMail(facts, origin) : null;
	if (!content) return null;
	return {
		...renderMail(content),
		headers: mailHeaders(origin, row.kind, row.userId, facts.group.slug),
		...replyTo(facts)
	};
}

/** An author is answered directly; an address that is none stays in the text only. */
function replyTo({ message }: NotificationFacts): { replyTo?: string } {
	const parsed = z.email().safeParse(message?.email);
	return parsed.success ? { replyTo: parsed.data } : {};
}

/** What was read in the product meanwhile is no news. */
async function renderDigest(read: Reader, row: DueMail, origin: string) {
	const found = await selectFacts(read)
		.where(and(eq(notifications.digestId, row.id), isNull(notifications.readAt)))
		.orderBy(desc(notifications.createdAt), desc(notifications.id));
	const content = digestMail(found.map(factsOf).filter(isStillTrue), origin);
	if (!content) return null;
	return { ...renderMail(content), headers: mailHeaders(origin, row.kind, row.userId, null) };
}

async function renderInvitation(read: Reader, row: DueMail, origin: string, now: Date) {
	if (row.invitationId === null) return null;
	const [found] = await read
		.select({
			invitation: invitations,
			invitedBy: users.name,
			groupName: groups.name,
			slug: groups.slug,
			description: groups.description
		})
		.from(invitations)
		.innerJoin(groups, eq(groups.id, invitations.groupId))
		.innerJoin(users, eq(users.id, invitations.createdBy))
		.where(eq(invitations.id, row.invitationId));
	if (!found) return null;
	const { id, usedAt, revokedAt, expiresAt, role } = found.invitation;
	if (usedAt !== null || revokedAt !== null || expiresAt <= now) return null;
	const { invitedBy, groupName, description, slug } = found;
	// The database keeps only the token's hash; the id and the secret give it back.
	const link = `${origin}/join/${derivedToken('invitation', id)}`;
	return {
		...renderMail(invitationMail({ invitedBy, groupName, description, role, expiresAt, link })),
		headers: mailHeaders(origin, row.kind, null, slug)
	};
}
