import { and, eq, lte } from 'drizzle-orm';
import { dayOf } from '../../../ledger/tasks';
import type { Database } from '../../db/client';
import { notifications, outbox } from '../../db/schema';
import { newId } from '../../ids';
import { messageIdOf } from '../../mail/message-id';

/** Early enough for the morning in Europe, after midnight in the Americas. Common practice, no source. */
const DIGEST_HOUR_UTC = 6;

/**
 * Puts what waits for a digest into one mail for each person: once a day, from six in the morning
 * (UTC). What comes later waits for the next day's.
 * @returns how many digests were queued
 */
export async function queueDigests(db: Database, now: Date): Promise<number> {
	if (now.getUTCHours() < DIGEST_HOUR_UTC) return 0;
	const waiting = and(eq(notifications.forDigest, true), lte(notifications.createdAt, now));
	const people = await db.read
		.selectDistinct({ userId: notifications.userId })
		.from(notifications)
		.where(waiting);
	let queued = 0;
	for (const { userId } of people) {
		if (await queueDigest(db, userId, now)) queued++;
	}
	return queued;
}

async function queueDigest(db: Database, userId: string, now: Date): Promise<boolean> {
	return db.write(async (tx) => {
		const id = newId();
		const [row] = await tx
			.insert(outbox)
			.values({
				id,
				kind: 'digest',
				dedupeKey: `digest:${userId}:${dayOf(now)}`,
				messageId: messageIdOf(id),
				userId,
				notBefore: now,
				createdAt: now
			})
			.onConflictDoNothing()
			.returning({ id: outbox.id });
		if (!row) return false;
		await tx
			.update(notifications)
			.set({ forDigest: false, digestId: id })
			.where(
				and(
					eq(notifications.userId, userId),
					eq(notifications.forDigest, true),
					lte(notifications.createdAt, now)
				)
			);
		return true;
	});
}
