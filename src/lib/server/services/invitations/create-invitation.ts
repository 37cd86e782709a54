import { mayInvite } from '../../../ledger/group-policy';
import { createInvitationInput, type CreateInvitationInput } from '../../../schemas/group';
import type { GroupContext } from '../../context';
import { invitations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { hashToken, newId, newToken } from '../../ids';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

export const INVITATION_DAYS = 14;

export interface CreatedInvitation {
	readonly id: string;
	/** For the link `/join/TOKEN`; it can't be shown again, since only its hash is kept. */
	readonly token: string;
	readonly expiresAt: Date;
}

/**
 * Makes a link that lets one person join with the given role within fourteen days.
 * @throws ServiceError forbidden
 */
export async function createInvitation(
	ctx: GroupContext,
	input: CreateInvitationInput
): Promise<CreatedInvitation> {
	const { role } = parseInput(createInvitationInput, input);
	if (!mayInvite(ctx.role, role)) {
		throw new ServiceError(
			'forbidden',
			'Your role does not let you invite someone with this role.'
		);
	}
	const id = newId();
	const token = newToken();
	const createdAt = ctx.now();
	const expiresAt = new Date(createdAt.getTime() + INVITATION_DAYS * 86_400_000);
	await ctx.db.write(async (tx) => {
		await tx.insert(invitations).values({
			id,
			groupId: ctx.group.id,
			tokenHash: hashToken(token),
			role,
			createdBy: ctx.actor.id,
			createdAt,
			expiresAt
		});
		await recordAudit(tx, ctx, {
			action: 'invitation.created',
			entity: 'invitation',
			entityId: id,
			groupId: ctx.group.id,
			after: { role, expiresAt: expiresAt.toISOString() }
		});
	});
	return { id, token, expiresAt };
}
