import { and, eq, inArray } from 'drizzle-orm';
import { DEFAULT_DELIVERY, type NotificationKind } from '../../../ledger/notifications';
import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { memberships, notificationChoices, notifications, outbox } from '../../db/schema';
import { newId } from '../../ids';
import { messageIdOf } from '../../mail/message-id';

export interface Notice {
	readonly kind: NotificationKind;
	readonly groupId: string;
	/** User ids; who is not in the group (any more), and who caused it, is left out. */
	readonly recipients: readonly string[];
	/** The event's own name: the same one is told to the same person once. */
	readonly event: string;
	readonly claimId?: string;
	readonly taskId?: string;
	readonly commentId?: string;
	readonly messageId?: string;
	/** What the rows it points at do not say: a reason, a date. */
	readonly text?: string;
	/** No mail before this time. */
	readonly notBefore?: Date;
	/** Good to know, and no mail, whatever the person has chosen. */
	readonly listOnly?: boolean;
}

/**
 * Tells people what is new, in the transaction of the change: the in-app list always; by mail as
 * each has chosen, at once or with the next digest.
 * @returns how many people were told
 */
export async function notify(
	tx: Transaction,
	ctx: Pick<Context, 'actor' | 'now'>,
	notice: Notice
): Promise<number> {
	const { kind, groupId } = notice;
	const wanted = [...new Set(notice.recipients)].filter((id) => id !== ctx.actor?.id);
	if (wanted.length === 0) return 0;
	const people = await tx
		.select({ userId: memberships.userId, delivery: notificationChoices.delivery })
		.from(memberships)
		.leftJoin(
			notificationChoices,
			and(eq(notificationChoices.userId, memberships.userId), eq(notificationChoices.kind, kind))
		)
		.where(and(eq(memberships.groupId, groupId), inArray(memberships.userId, wanted)));
	const now = ctx.now();
	let told = 0;
	for (const { userId, delivery } of people) {
		const chosen = notice.listOnly ? 'never' : (delivery ?? DEFAULT_DELIVERY[kind]);
		const dedupeKey = `${kind}:${notice.event}:${userId}`;
		const [row] = await tx
			.insert(notifications)
			.values({
				id: newId(),
				userId,
				groupId,
				kind,
				dedupeKey,
				actorId: ctx.actor?.id ?? null,
				claimId: notice.claimId ?? null,
				taskId: notice.taskId ?? null,
				commentId: notice.commentId ?? null,
				messageId: notice.messageId ?? null,
				text: notice.text ?? '',
				createdAt: now,
				forDigest: chosen === 'daily'
			})
			.onConflictDoNothing()
			.returning({ id: notifications.id });
		if (!row) continue;
		told++;
		if (chosen !== 'at-once') continue;
		const id = newId();
		await tx.insert(outbox).values({
			id,
			kind,
			dedupeKey,
			messageId: messageIdOf(id),
			userId,
			notificationId: row.id,
			claimId: notice.claimId ?? null,
			notBefore: notice.notBefore ?? now,
			createdAt: now
		});
	}
	return told;
}
