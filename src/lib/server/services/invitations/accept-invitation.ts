import { eq } from 'drizzle-orm';
import type { UserContext } from '../../context';
import { invitations, memberships } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { dropInvitationMail } from './drop-invitations';
import { findInvitation, findJoinedGroup } from './find-invitation';

/**
 * Joins the group a link stands for. Someone who is in it already keeps their role, and the link
 * stays good for the person it was meant for.
 * @returns the group's slug
 * @throws ServiceError not-found
 */
export async function acceptInvitation(
	ctx: UserContext,
	token: string
): Promise<{ readonly slug: string; readonly joined: boolean }> {
	return ctx.db.write(async (tx) => {
		const already = await findJoinedGroup(ctx, token, tx);
		if (already) return { slug: already.slug, joined: false };
		const invitation = await findInvitation(ctx, token, tx);
		if (!invitation) {
			throw new ServiceError('not-found', 'This link was used, revoked, or is older than 14 days.');
		}
		const { group, role } = invitation;
		const at = ctx.now();
		await tx
			.insert(memberships)
			.values({ groupId: group.id, userId: ctx.actor.id, role, createdAt: at });
		await tx
			.update(invitations)
			.set({ usedBy: ctx.actor.id, usedAt: at })
			.where(eq(invitations.id, invitation.id));
		await dropInvitationMail(tx, invitation.id);
		await recordAudit(tx, ctx, {
			action: 'member.joined',
			entity: 'user',
			entityId: ctx.actor.id,
			groupId: group.id,
			after: { role, invitation: invitation.id }
		});
		return { slug: group.slug, joined: true };
	});
}
