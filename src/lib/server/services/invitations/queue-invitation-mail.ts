import type { Transaction } from '../../db/client';
import { outbox } from '../../db/schema';
import { newId } from '../../ids';
import { messageIdOf } from '../../mail/message-id';

/** @param again whether the same invitation has been mailed before */
export async function queueInvitationMail(
	tx: Transaction,
	invitationId: string,
	now: Date,
	again = false
): Promise<void> {
	const id = newId();
	await tx.insert(outbox).values({
		id,
		kind: 'invitation',
		dedupeKey: `invitation:${invitationId}${again ? `:${id}` : ''}`,
		messageId: messageIdOf(id),
		invitationId,
		notBefore: now,
		createdAt: now
	});
}
