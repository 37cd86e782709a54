import { and, desc, eq, gt, isNull } from 'drizzle-orm';
import { mayRevokeInvitation } from '../../../ledger/group-policy';
import type { InvitationView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { invitations, users } from '../../db/schema';

/** Links that still work, newest first; none for those who may not make any. */
export async function listInvitations(ctx: GroupContext): Promise<readonly InvitationView[]> {
	if (!mayRevokeInvitation(ctx.role)) return [];
	const rows = await ctx.db.read
		.select({
			id: invitations.id,
			role: invitations.role,
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
	return rows.map((row) => ({ ...row, expiresAt: row.expiresAt.toISOString() }));
}
