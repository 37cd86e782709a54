import { and, eq, ne, or } from 'drizzle-orm';
import type { Finding, ResultSummary } from '../../../ledger/evidence';
import type { Transaction } from '../../db/client';
import { claims, earlierResults, recomputations } from '../../db/schema';
import { hashProblem } from '../recomputations/queue-recomputation';
import { carryFinding } from '../submissions/carry-finding';
import { problemOf } from '../submissions/certified-finding';
import type { AffineMap } from './affine';
import type { InequalityRecord } from './inequality-rows';

type Run = typeof recomputations.$inferSelect;

/**
 * Moves the runs of an inequality to an equivalent one. What was proved is said of the other's
 * representative; the whole result stays as it was computed, with the problem it is about.
 * @param map value of `to` = scale * value of `from` + shift; null where it is not exact (irrational
 *   coefficients): those runs are queued again
 */
export async function carryRuns(
	tx: Transaction,
	from: InequalityRecord,
	to: InequalityRecord,
	map: AffineMap | null
): Promise<void> {
	const runs = await tx
		.select()
		.from(recomputations)
		.where(eq(recomputations.inequalityId, from.id));
	for (const run of runs) await carryRun(tx, run, to, map);
}

const QUEUED = {
	state: 'queued',
	attempts: 0,
	leaseToken: null,
	leaseUntil: null,
	notBefore: null,
	progress: null
} as const;

async function carryRun(
	tx: Transaction,
	run: Run,
	to: InequalityRecord,
	map: AffineMap | null
): Promise<void> {
	const problem = problemOf(run.problem, to, run.problem.sense);
	const problemHash = hashProblem(problem);
	const rivals = await rivalsOf(tx, run, to.id, problemHash);
	const rival = rivals.find((row) => row.problemHash === problemHash) ?? rivals[0];
	const carried = { problem, inequalityId: to.id, ...valuesOf(run, to, map) };
	const update = (row: Partial<typeof recomputations.$inferInsert>) =>
		tx.update(recomputations).set(row).where(eq(recomputations.id, run.id));
	const remove = (id: string) => tx.delete(recomputations).where(eq(recomputations.id, id));
	if (rival && !carried.summary) {
		await repoint(tx, run.id, rival.id);
		await remove(run.id);
		return;
	}
	if (rival?.state === 'done') {
		// The kept inequality's own run answers for both; this one only adds what it proved.
		await repoint(tx, run.id, rival.id);
		await update({ ...carried, station: null });
	} else {
		if (rival) {
			await repoint(tx, rival.id, run.id);
			await remove(rival.id);
		}
		const taken = rivals.some(({ id, station }) => id !== rival?.id && station === run.station);
		const station = taken ? null : (run.station ?? rival?.station ?? null);
		await update({ ...carried, station, problemHash });
	}
	if (map) await carryEarlier(tx, run, to, map);
}

/** Runs of the kept inequality that answer the same: of the same problem, or the same station. */
async function rivalsOf(tx: Transaction, run: Run, keptId: string, problemHash: string) {
	const sameStation = run.station
		? and(eq(recomputations.inequalityId, keptId), eq(recomputations.station, run.station))
		: undefined;
	return tx
		.select({
			id: recomputations.id,
			state: recomputations.state,
			station: recomputations.station,
			problemHash: recomputations.problemHash
		})
		.from(recomputations)
		.where(
			and(
				ne(recomputations.id, run.id),
				or(eq(recomputations.problemHash, problemHash), sameStation)
			)
		);
}

/** A run's values in the kept normalisation; what can't be said of it exactly is queued again. */
function valuesOf(
	run: Run,
	to: InequalityRecord,
	map: AffineMap | null
): Partial<typeof recomputations.$inferInsert> {
	const { state, summary } = run;
	if (summary && map) {
		const { result, check } = carryFinding(findingOf(run, summary), to, map);
		const moved = withoutProblem(result);
		const { lower, upper, exact } = check?.checked ? check : moved;
		// A run under way is of the old form: what it had stands, and it is run again.
		return { ...(state === 'running' ? QUEUED : {}), summary: moved, lower, upper, exact };
	}
	if (state === 'failed' || state === 'cancelled') return {};
	const nothing = { summary: null, lower: null, upper: null, exact: null, checked: null };
	return { ...QUEUED, ...nothing, checkNote: null };
}

function findingOf(run: Run, summary: NonNullable<Run['summary']>): Finding {
	const { problem, checked, lower, upper, exact, checkNote } = run;
	const note = checkNote ?? '';
	const check = checked
		? ({ checked, lower, upper, exact, method: note } as const)
		: checked === null
			? null
			: ({ checked, reason: note } as const);
	return { result: { ...summary, problem }, check };
}

function withoutProblem(result: Finding['result']): ResultSummary {
	const { problem, ...summary } = result;
	void problem; // it stands in a column of its own
	return summary;
}

async function repoint(tx: Transaction, from: string, to: string): Promise<void> {
	await tx.update(claims).set({ recomputationId: to }).where(eq(claims.recomputationId, from));
	await tx
		.update(claims)
		.set({ otherBaseRecomputationId: to })
		.where(eq(claims.otherBaseRecomputationId, from));
}

async function carryEarlier(
	tx: Transaction,
	{ id, problem }: Run,
	to: InequalityRecord,
	map: AffineMap
): Promise<void> {
	const { id: earlierId, summary, lower, upper, exact, checkNote } = earlierResults;
	const rows = await tx
		.select({ id: earlierId, summary, lower, upper, exact, checkNote })
		.from(earlierResults)
		.where(eq(earlierResults.recomputationId, id));
	for (const row of rows) {
		const check = {
			checked: true,
			lower: row.lower,
			upper: row.upper,
			exact: row.exact,
			method: row.checkNote ?? ''
		} as const;
		const { result, check: carried } = carryFinding(
			{ result: { ...row.summary, problem }, check },
			to,
			map
		);
		const moved = withoutProblem(result);
		if (!carried?.checked) continue;
		const sides = { lower: carried.lower, upper: carried.upper, exact: carried.exact };
		await tx
			.update(earlierResults)
			.set({ summary: moved, ...sides })
			.where(eq(earlierResults.id, row.id));
	}
}
