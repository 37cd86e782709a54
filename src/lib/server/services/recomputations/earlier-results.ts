import { asc, eq, inArray } from 'drizzle-orm';
import { rationalOf } from '../../../ledger/figures';
import { parseRational, type Rational } from '../../../nonlocality/exact/rational';
import type { Reader, Transaction } from '../../db/client';
import { earlierResults, recomputations, results } from '../../db/schema';
import { newId } from '../../ids';

/** What is looked at of a run before its result is replaced. */
export const EARLIER_COLUMNS = {
	checked: recomputations.checked,
	checkNote: recomputations.checkNote,
	lower: recomputations.lower,
	upper: recomputations.upper,
	exact: recomputations.exact,
	summary: recomputations.summary,
	finishedAt: recomputations.finishedAt
} as const;

type Before = Pick<typeof recomputations.$inferSelect, keyof typeof EARLIER_COLUMNS>;
type Sides = Partial<Pick<typeof recomputations.$inferSelect, 'lower' | 'upper' | 'exact'>>;

/**
 * Keeps a checked result that a newer one is about to replace, when it is another solver's, or proves
 * more on a side: what is proved stays proved.
 */
export async function keepEarlier(
	tx: Transaction,
	recomputationId: string,
	before: Before,
	after: Sides & { readonly summary?: Before['summary'] | undefined }
): Promise<void> {
	const { summary, lower, upper, exact, checkNote, finishedAt } = before;
	if (!summary || !finishedAt) return;
	if (summary.solver === after.summary?.solver && !provesMore(before, after)) return;
	const [whole] = await tx
		.select({ result: results.result })
		.from(results)
		.where(eq(results.recomputationId, recomputationId));
	if (!whole) return;
	const kept = { lower, upper, exact, checkNote, finishedAt, ...whole };
	const id = newId();
	await tx
		.insert(earlierResults)
		.values({ id, recomputationId, solver: summary.solver, summary, ...kept });
}

function provesMore(before: Sides, after: Sides): boolean {
	const [lower, nextLower] = [sideOf(before, 'lower'), sideOf(after, 'lower')];
	const [upper, nextUpper] = [sideOf(before, 'upper'), sideOf(after, 'upper')];
	return (
		(lower !== null && (nextLower === null || lower.compare(nextLower) > 0)) ||
		(upper !== null && (nextUpper === null || upper.compare(nextUpper) < 0))
	);
}

function sideOf({ exact, ...sides }: Sides, side: 'lower' | 'upper'): Rational | null {
	if (exact) return parseRational(exact);
	const value = sides[side] ?? null;
	return value === null ? null : rationalOf(value);
}

/** What some runs had proved before, oldest first, without the certificates. */
export async function loadEarlier(read: Reader, recomputationIds: readonly string[]) {
	if (recomputationIds.length === 0) return [];
	return read
		.select({
			id: earlierResults.id,
			recomputationId: earlierResults.recomputationId,
			summary: earlierResults.summary,
			lower: earlierResults.lower,
			upper: earlierResults.upper,
			exact: earlierResults.exact,
			checkNote: earlierResults.checkNote
		})
		.from(earlierResults)
		.where(inArray(earlierResults.recomputationId, [...recomputationIds]))
		.orderBy(asc(earlierResults.finishedAt), asc(earlierResults.id));
}
