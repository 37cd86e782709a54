import { and, eq, gt, isNull } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { invitations, outbox } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { expiryOf } from './create-invitation';
import { queueInvitationMail } from './queue-invitation-mail';

/**
 * Mails a standing invitation once more, with the same link, and gives it fourteen days from now.
 * @returns where it is mailed to
 * @throws ServiceError forbidden, not-found, conflict (its mail has not gone out yet)
 */
export async function resendInvitation(
	ctx: GroupContext,
	id: string
): Promise<{ readonly email: string }> {
	return ctx.db.write(async (tx) => {
		const now = ctx.now();
		const [found] = await tx
			.select()
			.from(invitations)
			.where(
				and(
					eq(invitations.id, id),
					eq(invitations.groupId, ctx.group.id),
					isNull(invitations.usedAt),
					isNull(invitations.revokedAt),
					gt(invitations.expiresAt, now)
				)
			);
		if (!may(ctx.role, 'invite', found && { invited: found.role })) {
			throw new ServiceError('forbidden', 'Your role does not let you send this invitation.');
		}
		if (!found?.email) throw new ServiceError('not-found', 'This invitation stands no longer.');
		const waiting = await tx.$count(
			outbox,
			and(eq(outbox.invitationId, id), eq(outbox.state, 'waiting'))
		);
		if (waiting > 0) {
			throw new ServiceError('conflict', `The mail to ${found.email} has not gone out yet.`);
		}
		const expiresAt = expiryOf(now);
		await tx.update(invitations).set({ expiresAt }).where(eq(invitations.id, id));
		await queueInvitationMail(tx, id, now, true);
		const { email, role } = found;
		await recordAudit(tx, ctx, {
			action: 'invitation.resent',
			entity: 'invitation',
			entityId: id,
			groupId: ctx.group.id,
			before: { email, role, expiresAt: found.expiresAt.toISOString() },
			after: { email, role, expiresAt: expiresAt.toISOString() }
		});
		return { email };
	});
}
