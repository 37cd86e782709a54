import { and, asc, desc, eq, gt, inArray, isNull } from 'drizzle-orm';
import { mayInvite, mayRevokeInvitation } from '../../../ledger/group-policy';
import type { InvitationMail, InvitationView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { invitations, outbox, users } from '../../db/schema';

/** Invitations that still stand, newest first; none for those who may not make any. */
export async function listInvitations(ctx: GroupContext): Promise<readonly InvitationView[]> {
	if (!mayRevokeInvitation(ctx.role)) return [];
	const rows = await ctx.db.read
		.select({
			id: invitations.id,
			role: invitations.role,
			email: invitations.email,
			createdBy: users.name,
			expiresAt: invitations.expiresAt
		})
		.from(invitations)
		.innerJoin(users, eq(users.id, invitations.createdBy))
		.where(
			and(
				eq(invitations.groupId, ctx.group.id),
				isNull(invitations.usedAt),
				isNull(invitations.revokedAt),
				gt(invitations.expiresAt, ctx.now())
			)
		)
		.orderBy(desc(invitations.id));
	const mails = await lastMails(
		ctx,
		rows.map(({ id }) => id)
	);
	return rows.map((row) => ({
		...row,
		expiresAt: row.expiresAt.toISOString(),
		mail: mails.get(row.id) ?? null,
		mayResend: row.email !== null && mayInvite(ctx.role, row.role)
	}));
}

async function lastMails(
	ctx: GroupContext,
	ids: readonly string[]
): Promise<ReadonlyMap<string, InvitationMail>> {
	const rows = await ctx.db.read
		.select({ invitationId: outbox.invitationId, state: outbox.state })
		.from(outbox)
		.where(inArray(outbox.invitationId, [...ids]))
		.orderBy(asc(outbox.createdAt), asc(outbox.id));
	const mails = new Map<string, InvitationMail>();
	for (const { invitationId, state } of rows) {
		if (invitationId === null) continue;
		mails.set(invitationId, state === 'waiting' || state === 'sent' ? state : 'failed');
	}
	return mails;
}
