import { mayInvite } from '../../../ledger/group-policy';
import { createInvitationInput } from '../../../schemas/group';
import { config } from '../../config';
import type { GroupContext } from '../../context';
import { invitations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { hashToken, newId, newToken } from '../../ids';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

const INVITATION_DAYS = 14;
export const expiryOf = (from: Date) => new Date(from.getTime() + INVITATION_DAYS * 86_400_000);

export interface CreatedInvitation {
	readonly id: string;
	/** Can't be shown again, since only the hash of its token is kept. */
	readonly link: string;
	readonly expiresAt: Date;
}

/**
 * Makes a link that lets one person join with the given role within fourteen days.
 * @throws ServiceError forbidden
 */
export async function createInvitation(
	ctx: GroupContext,
	input: { readonly role: string }
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
	const expiresAt = expiryOf(createdAt);
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
	return { id, link: `${config().origin}/join/${token}`, expiresAt };
}
