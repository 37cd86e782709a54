import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { SOLVER } from '../../../nonlocality/quantities/solver-version';
import type { Problem } from '../../../nonlocality/problem';
import type { Transaction } from '../../db/client';
import { recomputations, type Station } from '../../db/schema';
import { newId } from '../../ids';

/** JSON with sorted keys: the same problem is the same text, however it was put together. */
export function canonicalJson(value: unknown): string {
	return JSON.stringify(value, (_, part: unknown) =>
		typeof part === 'object' && part !== null && !Array.isArray(part)
			? Object.fromEntries(Object.entries(part).sort(([a], [b]) => (a < b ? -1 : 1)))
			: part
	);
}

export function hashProblem(problem: Problem): string {
	return createHash('sha256').update(canonicalJson(problem)).digest('hex');
}

export interface QueuedProblem {
	readonly problem: Problem;
	readonly inequalityId: string | null;
	readonly groupId: string | null;
	readonly station?: Station;
}

/**
 * Queues a problem unless it has been, in the transaction of the claim that asks for it; the same
 * problem is solved once for all.
 * @param again whether a run that was cancelled or failed is queued once more
 * @returns the recomputation's id
 */
export async function queueRecomputation(
	tx: Transaction,
	{ problem, inequalityId, groupId, station }: QueuedProblem,
	now: Date,
	{ again = true } = {}
): Promise<string> {
	const problemHash = hashProblem(problem);
	const [known] = await tx
		.select({
			id: recomputations.id,
			state: recomputations.state,
			inequalityId: recomputations.inequalityId
		})
		.from(recomputations)
		.where(eq(recomputations.problemHash, problemHash));
	if (known) {
		if (again && (known.state === 'cancelled' || known.state === 'failed')) {
			await requeue(tx, known.id, groupId);
		}
		// A claim may have asked for the same problem before it became a station, or an inequality's.
		const belongs = {
			...(station ? { station } : {}),
			...(known.inequalityId === null && inequalityId ? { inequalityId } : {})
		};
		if (Object.keys(belongs).length > 0) {
			await tx.update(recomputations).set(belongs).where(eq(recomputations.id, known.id));
		}
		return known.id;
	}
	const id = newId();
	await tx.insert(recomputations).values({
		id,
		problemHash,
		problem,
		inequalityId,
		station: station ?? null,
		groupId,
		solver: SOLVER,
		createdAt: now
	});
	return id;
}

/** Puts a finished run back into the queue; a result it has stays until the new one replaces it. */
export async function requeue(tx: Transaction, id: string, groupId: string | null): Promise<void> {
	await tx
		.update(recomputations)
		.set({
			state: 'queued',
			attempts: 0,
			leaseToken: null,
			leaseUntil: null,
			notBefore: null,
			progress: null,
			reason: null,
			solver: SOLVER,
			renewal: false,
			...(groupId ? { groupId } : {})
		})
		.where(eq(recomputations.id, id));
}
