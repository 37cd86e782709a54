import { and, asc, eq, gte, inArray } from 'drizzle-orm';
import type { VerdictStatus } from '../../../ledger/claim';
import type { ChangedClaim } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { claims, groups, memberships, verdicts } from '../../db/schema';
import { claimRows, selectClaimRows } from '../claims/claim-rows';

/** So long a change is news. Common practice, no source. */
export const NEWS_DAYS = 30;

interface Change {
	readonly at: Date;
	readonly before: VerdictStatus | null;
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
	const since = new Date(ctx.now().getTime() - NEWS_DAYS * 86_400_000);
	const judged = read
		.select({ id: verdicts.claimId })
		.from(verdicts)
		.where(gte(verdicts.at, since));
	const history = await read
		.select({ claimId: verdicts.claimId, status: verdicts.status, at: verdicts.at })
		.from(verdicts)
		.innerJoin(claims, eq(claims.id, verdicts.claimId))
		.innerJoin(
			memberships,
			and(eq(memberships.groupId, claims.groupId), eq(memberships.userId, ctx.actor.id))
		)
		.where(
			and(
				eq(claims.createdBy, ctx.actor.id),
				eq(claims.state, 'active'),
				inArray(verdicts.claimId, judged)
			)
		)
		.orderBy(asc(verdicts.at), asc(verdicts.id));
	const turns = [...lastTurns(history)]
		.filter(([, { at }]) => at >= since)
		.sort(([, a], [, b]) => b.at.getTime() - a.at.getTime());
	const shown = new Map(turns.slice(0, limit));
	if (shown.size === 0) return { rows: [], total: 0 };
	const selected = await selectClaimRows(read, inArray(claims.id, [...shown.keys()]));
	const own = selected.map(({ claim }) => claim.groupId);
	const views = await claimRows(read, selected, ctx.now(), own);
	const rows = new Map(views.map((row) => [row.id, row]));
	const groupOf = await groupsOf(ctx, [...shown.keys()]);
	return {
		total: turns.length,
		rows: [...shown].flatMap(([id, { at, before }]): ChangedClaim[] => {
			const [row, group] = [rows.get(id), groupOf.get(id)];
			if (!row || !group) return [];
			const { slug, name } = group;
			return [{ row, groupSlug: slug, groupName: name, at: at.toISOString(), before }];
		})
	};
}

/** When each claim's status changed last, from verdicts in their order. */
function lastTurns(
	history: readonly { claimId: string; status: VerdictStatus; at: Date }[]
): ReadonlyMap<string, Change> {
	const latest = new Map<string, VerdictStatus>();
	const turns = new Map<string, Change>();
	for (const { claimId, status, at } of history) {
		const before = latest.get(claimId) ?? null;
		latest.set(claimId, status);
		if (status !== before && (before !== null || status !== 'open')) {
			turns.set(claimId, { at, before });
		}
	}
	return turns;
}

async function groupsOf(ctx: UserContext, claimIds: readonly string[]) {
	const rows = await ctx.db.read
		.select({ id: claims.id, slug: groups.slug, name: groups.name })
		.from(claims)
		.innerJoin(groups, eq(groups.id, claims.groupId))
		.where(inArray(claims.id, [...claimIds]));
	return new Map(rows.map((row) => [row.id, row]));
}
