import { and, desc, eq, gte, inArray, sql } from 'drizzle-orm';
import type { VerdictStatus } from '../../../ledger/claim';
import type { ChangedClaim } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { claims, groups, memberships, verdicts } from '../../db/schema';
import { claimRows, selectClaimRows } from '../claims/claim-rows';

/** So long a change is news. Common practice, no source. */
const NEWS_DAYS = 30;

interface Turn {
	readonly claimId: string;
	readonly at: Date;
	/** The status before; null: the first one, which was not Open. */
	readonly before: VerdictStatus | null;
	readonly groupSlug: string;
	readonly groupName: string;
}

/**
 * Claims the actor entered whose verdict turned within the last thirty days, newest turn first.
 * A claim that has been Open since it was entered has not turned.
 */
export async function changedClaims(
	ctx: UserContext,
	limit: number
): Promise<{ readonly rows: readonly ChangedClaim[]; readonly total: number }> {
	const { read } = ctx.db;
	const turns = await lastTurns(ctx);
	const shown = turns.slice(0, limit);
	if (shown.length === 0) return { rows: [], total: 0 };
	const ids = shown.map(({ claimId }) => claimId);
	const selected = await selectClaimRows(read, inArray(claims.id, ids));
	const own = selected.map(({ claim }) => claim.groupId);
	const rows = new Map(
		(await claimRows(read, selected, ctx.now(), own)).map((row) => [row.id, row])
	);
	return {
		total: turns.length,
		rows: shown.flatMap(({ claimId, at, ...turn }): ChangedClaim[] => {
			const row = rows.get(claimId);
			return row ? [{ ...turn, row, at: at.toISOString() }] : [];
		})
	};
}

/** When the status of each claim changed last, of those where that is news. */
function lastTurns(ctx: UserContext): Promise<Turn[]> {
	const { read } = ctx.db;
	const me = ctx.actor.id;
	const since = new Date(ctx.now().getTime() - NEWS_DAYS * 86_400_000);
	// From the groups to the claims to their verdicts: each step has an index.
	const history = read.$with('history').as(
		read
			.select({
				claimId: verdicts.claimId,
				groupId: claims.groupId,
				id: verdicts.id,
				status: verdicts.status,
				at: verdicts.at,
				before: sql<VerdictStatus | null>`lag(${verdicts.status}) over (
					partition by ${verdicts.claimId} order by ${verdicts.at}, ${verdicts.id})`.as('before')
			})
			.from(memberships)
			.innerJoin(claims, eq(claims.groupId, memberships.groupId))
			.innerJoin(verdicts, eq(verdicts.claimId, claims.id))
			.where(and(eq(memberships.userId, me), eq(claims.createdBy, me), eq(claims.state, 'active')))
	);
	const turns = read.$with('turns').as(
		read
			.select({
				claimId: history.claimId,
				groupId: history.groupId,
				at: history.at,
				before: history.before,
				place: sql<number>`row_number() over (
					partition by ${history.claimId} order by ${history.at} desc, ${history.id} desc)`.as('place')
			})
			.from(history)
			.where(sql`${history.status} <> coalesce(${history.before}, 'open')`)
	);
	return read
		.with(history, turns)
		.select({
			claimId: turns.claimId,
			at: turns.at,
			before: turns.before,
			groupSlug: groups.slug,
			groupName: groups.name
		})
		.from(turns)
		.innerJoin(groups, eq(groups.id, turns.groupId))
		.where(and(eq(turns.place, 1), gte(turns.at, since)))
		.orderBy(desc(turns.at), desc(turns.claimId));
}
