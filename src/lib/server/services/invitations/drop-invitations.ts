import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { invitations, outbox } from '../../db/schema';
import { recordAudit } from '../audit';

/**
 * Makes those of the given invitations worthless that nobody has used or revoked; their mail that
 * has not gone out stays unsent.
 * @returns how many there were
 */
export async function dropInvitations(
	tx: Transaction,
	ctx: GroupContext,
	ids: readonly string[]
): Promise<number> {
	if (ids.length === 0) return 0;
	const dropped = await tx
		.update(invitations)
		.set({ revokedAt: ctx.now() })
		.where(
			and(
				inArray(invitations.id, [...ids]),
				eq(invitations.groupId, ctx.group.id),
				isNull(invitations.usedAt),
				isNull(invitations.revokedAt)
			)
		)
		.returning({ id: invitations.id, role: invitations.role, email: invitations.email });
	for (const { id, role, email } of dropped) {
		await dropInvitationMail(tx, id);
		await recordAudit(tx, ctx, {
			action: 'invitation.revoked',
			entity: 'invitation',
			entityId: id,
			groupId: ctx.group.id,
			before: { role, email, revoked: false },
			after: { role, email, revoked: true }
		});
	}
	return dropped.length;
}

/** What has not been sent of an invitation stays unsent. */
export async function dropInvitationMail(tx: Transaction, invitationId: string): Promise<void> {
	await tx
		.update(outbox)
		.set({ state: 'dropped' })
		.where(and(eq(outbox.invitationId, invitationId), eq(outbox.state, 'waiting')));
}
