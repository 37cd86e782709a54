import { and, eq, isNull } from 'drizzle-orm';
import { mayRevokeInvitation } from '../../../ledger/group-policy';
import type { GroupContext } from '../../context';
import { invitations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';

/**
 * Makes a link of this group worthless.
 * @throws ServiceError forbidden, not-found (used, revoked, or of another group)
 */
export async function revokeInvitation(ctx: GroupContext, id: string): Promise<void> {
	if (!mayRevokeInvitation(ctx.role)) {
		throw new ServiceError('forbidden', 'Only maintainers and owners revoke joining links.');
	}
	await ctx.db.write(async (tx) => {
		const revoked = await tx
			.update(invitations)
			.set({ revokedAt: ctx.now() })
			.where(
				and(
					eq(invitations.id, id),
					eq(invitations.groupId, ctx.group.id),
					isNull(invitations.usedAt),
					isNull(invitations.revokedAt)
				)
			)
			.returning({ id: invitations.id });
		if (revoked.length === 0) {
			throw new ServiceError('not-found', 'This link has been used or revoked already.');
		}
		await recordAudit(tx, ctx, {
			action: 'invitation.revoked',
			entity: 'invitation',
			entityId: id,
			groupId: ctx.group.id
		});
	});
}
