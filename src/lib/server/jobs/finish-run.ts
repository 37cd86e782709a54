import { eq } from 'drizzle-orm';
import type { CheckOutcome } from '../../nonlocality/certificates/types';
import type { DoneResult, Result } from '../../nonlocality/problem';
import type { Database, Transaction } from '../db/client';
import { recomputations } from '../db/schema';
import { deriveTouchedClaims } from '../services/claims/derive-claim';
import { MOST_ATTEMPTS, backoff, holdsLease, type Lease } from './lease';
import type { JobLog } from './runner';

export type RunOutcome =
	| { readonly kind: 'solved'; readonly result: Result; readonly check: CheckOutcome | null }
	| { readonly kind: 'cancelled' }
	/** Ended for a reason that trying again does not change. */
	| { readonly kind: 'failed'; readonly reason: string }
	/** The thread is gone; it may have been bad luck. */
	| { readonly kind: 'crashed'; readonly reason: string };

export interface FinishedRun {
	readonly db: Database;
	readonly log: JobLog;
	readonly lease: Lease;
	readonly outcome: RunOutcome;
	readonly now: Date;
}

type Row = Partial<typeof recomputations.$inferInsert>;

/**
 * Stores what became of a run and, in the same transaction, judges every claim it touches again.
 * A late runner that lost its lease changes nothing.
 */
export async function finishRun({ db, log, lease, outcome, now }: FinishedRun): Promise<boolean> {
	const values = rowOf(outcome, lease, now);
	if (outcome.kind === 'solved' && values.checked === false) {
		log.error(
			{ recomputation: lease.id, quantity: lease.problem.quantity, note: values.checkNote },
			'ALARM: a solver produced a certificate that the independent check does not accept'
		);
	}
	const stored = await db.write((tx) => store(tx, lease, values, now));
	if (!stored) log.warn({ recomputation: lease.id }, 'a run that lost its lease was dropped');
	return stored;
}

async function store(tx: Transaction, lease: Lease, values: Row, now: Date): Promise<boolean> {
	const [before] = await tx
		.select({ checked: recomputations.checked })
		.from(recomputations)
		.where(holdsLease(lease));
	if (!before) return false;
	// A repeated run that ends without a result leaves the proved one in place.
	const keepsResult = before.checked === true && values.result === undefined;
	const kept: Row =
		keepsResult && values.state !== 'queued' ? { ...values, state: 'done' } : values;
	await tx
		.update(recomputations)
		.set({ ...kept, leaseToken: null, leaseUntil: null, progress: null })
		.where(eq(recomputations.id, lease.id));
	await deriveTouchedClaims(tx, lease.id, now);
	return true;
}

function rowOf(outcome: RunOutcome, lease: Lease, now: Date): Row {
	switch (outcome.kind) {
		case 'cancelled':
			return { state: 'cancelled', finishedAt: now, reason: 'cancelled' };
		case 'failed':
			return { state: 'failed', finishedAt: now, reason: outcome.reason };
		case 'crashed':
			return lease.attempts < MOST_ATTEMPTS
				? {
						state: 'queued',
						notBefore: new Date(now.getTime() + backoff(lease.attempts)),
						reason: outcome.reason
					}
				: {
						state: 'failed',
						finishedAt: now,
						reason: `${outcome.reason}, ${MOST_ATTEMPTS} times in a row`
					};
		case 'solved':
			return rowOfResult(outcome.result, outcome.check, now);
	}
}

function rowOfResult(result: Result, check: CheckOutcome | null, now: Date): Row {
	if (result.status === 'cancelled') {
		return { state: 'cancelled', finishedAt: now, reason: 'cancelled' };
	}
	if (result.status !== 'done') {
		return { state: 'failed', finishedAt: now, reason: result.reason };
	}
	if (check && !check.checked) {
		return {
			state: 'failed',
			finishedAt: now,
			checked: false,
			checkNote: check.reason,
			reason: `the independent check does not accept the certificate: ${check.reason}`
		};
	}
	return {
		state: 'done',
		finishedAt: now,
		result,
		...sides(result, check),
		checked: check ? true : null,
		checkNote: check ? check.method : null,
		reason: null
	};
}

/** What the check proved; without a certificate what the solver says, which stays unchecked. */
function sides(result: DoneResult, check: CheckOutcome | null): Row {
	const { lower, upper, exact } = check?.checked ? check : result;
	return { lower, upper, exact };
}
