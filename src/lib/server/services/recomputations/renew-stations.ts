import { and, inArray, isNotNull, isNull, ne, or, sql } from 'drizzle-orm';
import { SOLVER } from '../../../nonlocality/quantities/solver-version';
import type { Database } from '../../db/client';
import { recomputations } from '../../db/schema';

/**
 * Queues the stations that an earlier solver computed, once for the present one, behind everything
 * that somebody waits for. What they proved stands until then and after: the best of all results
 * counts, and verdicts are derived again as each arrives.
 * @returns how many were queued; 0 at the second start with the same solver
 */
export async function renewStations(db: Database): Promise<number> {
	const outdated = or(
		ne(recomputations.solver, SOLVER),
		// Queued before the solver was kept: its result says which it was.
		and(
			isNull(recomputations.solver),
			or(
				isNull(recomputations.summary),
				sql`json_extract(${recomputations.summary}, '$.solver') <> ${SOLVER}`
			)
		)
	);
	const renewed = await db.write((tx) =>
		tx
			.update(recomputations)
			.set({
				state: 'queued',
				renewal: true,
				solver: SOLVER,
				attempts: 0,
				leaseToken: null,
				leaseUntil: null,
				notBefore: null,
				progress: null
			})
			.where(
				and(
					isNotNull(recomputations.station),
					inArray(recomputations.state, ['done', 'failed']),
					outdated
				)
			)
			.returning({ id: recomputations.id })
	);
	return renewed.length;
}
