import { and, desc, eq, gt, inArray, isNull, notExists, or, sql } from 'drizzle-orm';
import type { Transaction } from '../../db/client';
import { notifications, outbox } from '../../db/schema';
import { maintainersOf } from '../groups/maintainers-of';
import { notify } from './notify';

/** Stations explain most discrepancies: the mail waits for them, but not longer than this. */
export const MAIL_WAIT_MS = 60_000;

export interface ToldClaim {
	readonly id: string;
	readonly groupId: string;
	readonly createdBy: string;
}

/** The product itself tells it: nobody is left out as the one who caused it. */
const product = (now: Date) => ({ actor: null, now: () => now });

/**
 * Tells the one who entered the claim and everyone from maintainer up, in the transaction that
 * stores the verdict.
 * @param verdictId the stored verdict that turned to a discrepancy: told once per person and turn
 */
export async function tellDiscrepancy(
	tx: Transaction,
	claim: ToldClaim,
	verdictId: string,
	now: Date,
	stationsDone: boolean
): Promise<number> {
	return notify(tx, product(now), {
		kind: 'discrepancy',
		groupId: claim.groupId,
		recipients: [claim.createdBy, ...(await maintainersOf(tx, claim.groupId))],
		event: verdictId,
		claimId: claim.id,
		notBefore: stationsDone ? now : new Date(now.getTime() + MAIL_WAIT_MS)
	});
}

/** Tells those who were told of the discrepancy that it is over; nothing when nobody was. */
export async function tellSettled(
	tx: Transaction,
	claim: ToldClaim,
	verdictId: string,
	now: Date
): Promise<number> {
	const ofKind = (kind: 'discrepancy' | 'settled') =>
		and(eq(notifications.claimId, claim.id), eq(notifications.kind, kind));
	// Ids rise with time, also within one millisecond.
	const [lastSettled] = await tx
		.select({ id: notifications.id })
		.from(notifications)
		.where(ofKind('settled'))
		.orderBy(desc(notifications.id))
		.limit(1);
	const told = await tx
		.selectDistinct({ userId: notifications.userId })
		.from(notifications)
		.where(
			and(ofKind('discrepancy'), lastSettled ? gt(notifications.id, lastSettled.id) : undefined)
		);
	return notify(tx, product(now), {
		kind: 'settled',
		groupId: claim.groupId,
		recipients: told.map(({ userId }) => userId),
		event: verdictId,
		claimId: claim.id
	});
}

/**
 * The claim no longer disagrees: what has not been sent stays unsent, and who has neither read it
 * nor been mailed is told nothing.
 */
export async function dropWaitingMails(tx: Transaction, claimId: string): Promise<void> {
	await tx
		.update(outbox)
		// Kept as a record of what was not sent, apart from the notification that goes.
		.set({ state: 'dropped', notificationId: null })
		.where(
			and(eq(outbox.claimId, claimId), eq(outbox.kind, 'discrepancy'), eq(outbox.state, 'waiting'))
		);
	const mailed = tx
		.select({ id: outbox.id })
		.from(outbox)
		.where(
			and(
				// The plus keeps SQLite to the ids: without it, it reads every mail that was ever sent.
				sql`+${outbox.state} = 'sent'`,
				or(eq(outbox.notificationId, notifications.id), eq(outbox.id, notifications.digestId))
			)
		);
	await tx
		.delete(notifications)
		.where(
			and(
				eq(notifications.claimId, claimId),
				eq(notifications.kind, 'discrepancy'),
				isNull(notifications.readAt),
				notExists(mailed)
			)
		);
}

/** The stations are done: nothing more to wait for. */
export async function releaseWaitingMails(
	tx: Transaction,
	claimIds: readonly string[],
	now: Date
): Promise<void> {
	if (claimIds.length === 0) return;
	await tx
		.update(outbox)
		.set({ notBefore: now })
		.where(
			and(
				inArray(outbox.claimId, [...claimIds]),
				eq(outbox.kind, 'discrepancy'),
				eq(outbox.state, 'waiting'),
				eq(outbox.attempts, 0)
			)
		);
}
