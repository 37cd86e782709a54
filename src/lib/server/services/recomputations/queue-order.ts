import { eq, sql } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { claims, recomputations, type Station } from '../../db/schema';

/** Over at once, and many a diagnosis rests on them. */
const INSTANT: readonly Station[] = ['local', 'no-signalling'];

/**
 * What comes first within a group, smallest first: the instant stations, then what a claim itself
 * asks for, then all other stations, so that nobody's claim waits behind those of other
 * inequalities; each in the order they were queued. What only a newer solver asks for comes last.
 */
export const QUEUE_ORDER = [
	sql`${recomputations.renewal}`,
	sql`case
		when ${recomputations.station} in ${[...INSTANT]} then 0
		when exists (
			select 1 from ${claims}
			where ${claims.recomputationId} = ${recomputations.id} and ${claims.state} <> 'withdrawn'
		) then 1
		else 2 end`,
	sql`${recomputations.createdAt}`,
	sql`${recomputations.id}`
] as const;

/**
 * How many jobs stand before each queued one, at most: those of its own group in the queue's order
 * and, as groups take turns, one of every other group for each of them and for itself. Read once
 * for all that a page shows.
 */
export async function jobsAhead(read: Reader): Promise<ReadonlyMap<string, number>> {
	const queued = await read
		.select({
			id: recomputations.id,
			groupId: recomputations.groupId,
			before: sql<number>`row_number() over (
				partition by ${recomputations.groupId}
				order by ${sql.join([...QUEUE_ORDER], sql`, `)}) - 1`
		})
		.from(recomputations)
		.where(eq(recomputations.state, 'queued'));
	const jobs = new Map<string | null, number>();
	for (const { groupId } of queued) jobs.set(groupId, (jobs.get(groupId) ?? 0) + 1);
	return new Map(
		queued.map(({ id, groupId, before }) => {
			const others = [...jobs].filter(([group]) => group !== groupId);
			const turns = others.reduce((sum, [, count]) => sum + Math.min(count, before + 1), 0);
			return [id, before + turns];
		})
	);
}
