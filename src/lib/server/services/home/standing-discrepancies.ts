import { and, asc, count, desc, eq, inArray } from 'drizzle-orm';
import type { HomeView } from '../../../schemas/talk-views';
import type { GroupView } from '../../../schemas/views';
import type { UserContext } from '../../context';
import { claims } from '../../db/schema';
import { claimRows, selectClaimRows } from '../claims/claim-rows';
import { isDisputedClaim } from '../transcriptions/disputed-claims';

/**
 * Claims of these groups that disagree with what was recomputed, the last changed first; those
 * whose entry differs from the paper last, since there the paper may well be right.
 */
export async function standingDiscrepancies(
	ctx: UserContext,
	groups: readonly GroupView[],
	limit: number
): Promise<{
	readonly rows: HomeView['discrepancies'];
	readonly ofGroup: ReadonlyMap<string, number>;
}> {
	if (groups.length === 0) return { rows: [], ofGroup: new Map() };
	const { read } = ctx.db;
	const standing = and(
		inArray(
			claims.groupId,
			groups.map(({ id }) => id)
		),
		eq(claims.state, 'active'),
		eq(claims.status, 'discrepancy')
	);
	const counted = await read
		.select({ groupId: claims.groupId, total: count() })
		.from(claims)
		.where(standing)
		.groupBy(claims.groupId);
	const selected = await selectClaimRows(read, standing)
		.orderBy(asc(isDisputedClaim), desc(claims.updatedAt), desc(claims.id))
		.limit(limit);
	const own = groups.map(({ id }) => id);
	const rows = await claimRows(read, selected, ctx.now(), own);
	const groupOf = new Map(selected.map(({ claim }) => [claim.id, claim.groupId]));
	return {
		ofGroup: new Map(counted.map(({ groupId, total }) => [groupId, total])),
		rows: rows.flatMap((row) => {
			const group = groups.find(({ id }) => id === groupOf.get(row.id));
			return group ? [{ row, groupSlug: group.slug, groupName: group.name }] : [];
		})
	};
}
