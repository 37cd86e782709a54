import { eq } from 'drizzle-orm';
import { summaryOf } from '../../ledger/evidence';
import type { CheckOutcome } from '../../nonlocality/certificates/types';
import type { DoneResult, Result } from '../../nonlocality/problem';
import type { Database, Transaction } from '../db/client';
import { recomputations, results } from '../db/schema';
import { deriveTouchedClaims } from '../services/claims/derive-claim';
import { EARLIER_COLUMNS, keepEarlier } from '../services/recomputations/earlier-results';
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
	const { row, whole } = endingOf(outcome, lease, now);
	if (row.checked === false) {
		log.error(
			{ recomputation: lease.id, quantity: lease.problem.quantity, note: row.checkNote },
			'ALARM: a solver produced a certificate that the independent check does not accept'
		);
	}
	const stored = await db.write((tx) => store(tx, lease, { row, whole }, now));
	if (!stored) log.warn({ recomputation: lease.id }, 'a run that lost its lease was dropped');
	return stored;
}

/** What is written of a run: its row, and the whole result where there is one. */
interface Ending {
	readonly row: Row;
	readonly whole: DoneResult | null;
}

async function store(
	tx: Transaction,
	lease: Lease,
	{ row, whole }: Ending,
	now: Date
): Promise<boolean> {
	const [before] = await tx.select(EARLIER_COLUMNS).from(recomputations).where(holdsLease(lease));
	if (!before) return false;
	// A repeated run that ends without a result leaves the proved one, and its check, in place.
	const keepsResult = before.checked === true && !whole && row.state !== 'queued';
	const { finishedAt, reason } = row;
	if (whole && before.checked) await keepEarlier(tx, lease.id, before, row);
	await tx
		.update(recomputations)
		.set({
			...(keepsResult ? { state: 'done', finishedAt, reason } : row),
			leaseToken: null,
			leaseUntil: null,
			progress: null,
			...(row.state === 'queued' ? {} : { renewal: false })
		})
		.where(eq(recomputations.id, lease.id));
	if (whole) {
		await tx
			.insert(results)
			.values({ recomputationId: lease.id, result: whole })
			.onConflictDoUpdate({ target: results.recomputationId, set: { result: whole } });
	}
	await deriveTouchedClaims(tx, lease.id, now);
	return true;
}

function endingOf(outcome: RunOutcome, lease: Lease, now: Date): Ending {
	if (outcome.kind === 'solved') return endingOfResult(outcome.result, outcome.check, now);
	return { row: rowOf(outcome, lease, now), whole: null };
}

function rowOf(outcome: Exclude<RunOutcome, { kind: 'solved' }>, lease: Lease, now: Date): Row {
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
	}
}

function endingOfResult(result: Result, check: CheckOutcome | null, now: Date): Ending {
	const without = (row: Row): Ending => ({ row: { ...row, finishedAt: now }, whole: null });
	if (result.status === 'cancelled') return without({ state: 'cancelled', reason: 'cancelled' });
	if (result.status !== 'done') return without({ state: 'failed', reason: result.reason });
	if (check && !check.checked) {
		return without({
			state: 'failed',
			checked: false,
			checkNote: check.reason,
			reason: `the independent check does not accept the certificate: ${check.reason}`
		});
	}
	const row: Row = {
		state: 'done',
		finishedAt: now,
		summary: summaryOf(result),
		...sides(result, check),
		checked: check ? true : null,
		checkNote: check ? check.method : null,
		reason: null
	};
	return { row, whole: result };
}

/** What the check proved; without a certificate what the solver says, which stays unchecked. */
function sides(result: DoneResult, check: CheckOutcome | null): Row {
	const { lower, upper, exact } = check?.checked ? check : result;
	return { lower, upper, exact };
}
