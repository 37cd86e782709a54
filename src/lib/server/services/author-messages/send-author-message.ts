import { and, count, eq, gt, min } from 'drizzle-orm';
import { authorMessageInput, type AuthorMessageInput } from '../../../schemas/publication-input';
import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { authorMessages, claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { maintainersOf } from '../groups/maintainers-of';
import { isPublicClaim } from '../inequalities/visibility';
import { notify } from '../notifications/notify';
import { parseInput } from '../parse-input';

/** Of one claim; a paper has few authors, and maintainers' mailboxes are to stay readable. */
export const MESSAGES_A_DAY = 20;

const DAY_MS = 86_400_000;

/**
 * Takes what an author writes about a public claim: kept for the group's maintainers, who are told
 * of it. Nobody verifies who wrote it.
 * @throws ServiceError not-found for a claim that is not public; rate-limited
 */
export async function sendAuthorMessage(
	ctx: Context,
	claimId: string,
	input: AuthorMessageInput
): Promise<void> {
	const { name, email, message, link } = parseInput(authorMessageInput, input);
	const now = ctx.now();
	// Whoever writes does so as an author, not as whom they may be signed in as.
	const visitor = { ...ctx, actor: null };
	await ctx.db.write(async (tx) => {
		const [claim] = await tx
			.select({ id: claims.id, groupId: claims.groupId })
			.from(claims)
			.where(and(eq(claims.id, claimId), isPublicClaim));
		if (!claim) throw new ServiceError('not-found', 'There is no such public claim.');
		await requireRoom(tx, claim.id, now);
		const id = newId();
		const whole = link ? `${message}\n\n${link}` : message;
		await tx
			.insert(authorMessages)
			.values({ id, claimId: claim.id, name, email, message: whole, sentAt: now });
		// The audit can't be erased, so it holds nothing of a person outside the group.
		await recordAudit(tx, visitor, {
			action: 'author-message.received',
			entity: 'author-message',
			entityId: id,
			groupId: claim.groupId,
			claimId: claim.id
		});
		await notify(tx, visitor, {
			kind: 'author-message',
			groupId: claim.groupId,
			recipients: await maintainersOf(tx, claim.groupId),
			event: id,
			claimId: claim.id,
			messageId: id,
			text: whole
		});
	});
}

async function requireRoom(tx: Transaction, claimId: string, now: Date): Promise<void> {
	const since = new Date(now.getTime() - DAY_MS);
	const [sent] = await tx
		.select({ number: count(), first: min(authorMessages.sentAt) })
		.from(authorMessages)
		.where(and(eq(authorMessages.claimId, claimId), gt(authorMessages.sentAt, since)));
	if (!sent || sent.number < MESSAGES_A_DAY) return;
	const again = (sent.first?.getTime() ?? now.getTime()) + DAY_MS - now.getTime();
	throw new ServiceError(
		'rate-limited',
		`This claim has had ${MESSAGES_A_DAY} messages in a day, which is as many as are taken. Keep your text and try again tomorrow.`,
		[],
		Math.max(1, Math.ceil(again / 1000))
	);
}
