import { and, count, eq, inArray, isNull, lt, lte, or, sql } from 'drizzle-orm';
import type { Problem, Progress } from '../../nonlocality/problem';
import type { Database, Transaction } from '../db/client';
import { recomputations } from '../db/schema';
import { newToken } from '../ids';
import { QUEUE_ORDER } from '../services/recomputations/queue-order';

/** A runner that is not heard of for this long has died; it is heard of three times as often. */
export const LEASE_MS = 30_000;
export const HEARTBEAT_MS = LEASE_MS / 3;
/** A crash counts: a problem that brings the process down must not do so for ever. */
export const MOST_ATTEMPTS = 3;
const FIRST_BACKOFF_MS = 10_000;

/** 10 s, 20 s ... after the failed attempt of that number (from 1). */
export const backoff = (attempt: number) => FIRST_BACKOFF_MS * 2 ** (attempt - 1);

export interface Lease {
	readonly id: string;
	/** Whoever finishes must still hold it; a late one changes nothing. */
	readonly token: string;
	readonly problem: Problem;
	readonly groupId: string | null;
	readonly attempts: number;
}

const due = (now: Date) =>
	and(
		eq(recomputations.state, 'queued'),
		or(isNull(recomputations.notBefore), lte(recomputations.notBefore, now))
	);

/**
 * Takes the next problem of the group that was served least recently.
 * @param onTaken what else happens in the transaction
 * @param served when each group (`''`: none) was last served, as rising numbers; updated here
 */
export async function takeNext(
	db: Database,
	now: Date,
	served: Map<string, number>,
	onTaken?: (tx: Transaction, id: string) => Promise<void>
): Promise<Lease | null> {
	return db.write(async (tx) => {
		// What only a newer solver asks for takes no group's turn from what somebody waits for.
		const groupsWaiting = (renewal: boolean) =>
			tx
				.select({ groupId: recomputations.groupId, jobs: count() })
				.from(recomputations)
				.where(and(due(now), eq(recomputations.renewal, renewal)))
				.groupBy(recomputations.groupId);
		const asked = await groupsWaiting(false);
		const waiting = asked.length > 0 ? asked : await groupsWaiting(true);
		const turn = waiting
			.map(({ groupId }) => ({ groupId, last: served.get(groupId ?? '') ?? 0 }))
			.sort((a, b) => a.last - b.last)[0];
		if (!turn) return null;
		const [next] = await tx
			.select({ id: recomputations.id })
			.from(recomputations)
			.where(
				and(
					due(now),
					turn.groupId === null
						? isNull(recomputations.groupId)
						: eq(recomputations.groupId, turn.groupId)
				)
			)
			.orderBy(...QUEUE_ORDER)
			.limit(1);
		const lease = next && (await take(tx, next.id, now));
		if (lease) await onTaken?.(tx, lease.id);
		if (lease) served.set(turn.groupId ?? '', Math.max(0, ...served.values()) + 1);
		return lease ?? null;
	});
}

async function take(tx: Transaction, id: string, now: Date): Promise<Lease | null> {
	const token = newToken();
	const [row] = await tx
		.update(recomputations)
		.set({
			state: 'running',
			leaseToken: token,
			leaseUntil: new Date(now.getTime() + LEASE_MS),
			attempts: sql`${recomputations.attempts} + 1`,
			startedAt: now,
			progress: null,
			reason: null
		})
		.where(and(eq(recomputations.id, id), eq(recomputations.state, 'queued')))
		.returning({
			problem: recomputations.problem,
			groupId: recomputations.groupId,
			attempts: recomputations.attempts
		});
	return row ? { id, token, ...row } : null;
}

export const holdsLease = (lease: Pick<Lease, 'id' | 'token'>) =>
	and(
		eq(recomputations.id, lease.id),
		eq(recomputations.leaseToken, lease.token),
		eq(recomputations.state, 'running')
	);

/** Says that the runner lives. False: the lease was lost, or the run was cancelled. */
export async function extendLease(
	db: Database,
	lease: Lease,
	now: Date,
	progress: Progress | null
): Promise<boolean> {
	const rows = await db.write((tx) =>
		tx
			.update(recomputations)
			.set({
				leaseUntil: new Date(now.getTime() + LEASE_MS),
				...(progress ? { progress } : {})
			})
			.where(holdsLease(lease))
			.returning({ id: recomputations.id })
	);
	return rows.length > 0;
}

/**
 * Puts back what runners left behind when they died: at the start all of it, later those whose
 * lease has run out. Ids of those given up are returned, so that their claims are judged again.
 */
export async function reap(tx: Transaction, now: Date, all: boolean): Promise<string[]> {
	const lost = await tx
		.select({ id: recomputations.id, attempts: recomputations.attempts })
		.from(recomputations)
		.where(
			and(eq(recomputations.state, 'running'), all ? undefined : lt(recomputations.leaseUntil, now))
		);
	const spent = lost.filter(({ attempts }) => attempts >= MOST_ATTEMPTS).map(({ id }) => id);
	const again = lost.filter(({ attempts }) => attempts < MOST_ATTEMPTS).map(({ id }) => id);
	const free = { leaseToken: null, leaseUntil: null, progress: null };
	if (again.length > 0)
		await tx
			.update(recomputations)
			.set({ ...free, state: 'queued', notBefore: null })
			.where(inArray(recomputations.id, again));
	if (spent.length > 0)
		await tx
			.update(recomputations)
			.set({
				...free,
				state: 'failed',
				finishedAt: now,
				reason: `the server stopped ${MOST_ATTEMPTS} times while it ran`
			})
			.where(inArray(recomputations.id, spent));
	return spent;
}

/** An orderly stop: the run goes back to the queue as if it had not been started. */
export async function giveBack(db: Database, lease: Lease): Promise<void> {
	await db.write((tx) =>
		tx
			.update(recomputations)
			.set({
				state: 'queued',
				leaseToken: null,
				leaseUntil: null,
				progress: null,
				attempts: sql`${recomputations.attempts} - 1`
			})
			.where(holdsLease(lease))
	);
}
