import { and, eq, inArray } from 'drizzle-orm';
import { ACTIVITY_KINDS, type ActivityEntry, type ActivityKind } from '../../../schemas/talk-views';
import type { GroupContext } from '../../context';
import { audit } from '../../db/schema';
import { findClaim } from '../claims/find-claim';
import { activityEntries } from './activity-entries';
import { actionsOf } from './activity-sentence';

/** Beside a claim; the group's activity, filtered by the claim, has all of it. */
const MOST_ENTRIES = 40;

export interface ClaimActivity {
	readonly entries: readonly ActivityEntry[];
	/** Entries of the chosen kind that are not shown. */
	readonly more: number;
	/** The kinds that there are any of. */
	readonly kinds: readonly ActivityKind[];
}

/**
 * What happened to a claim, its tasks and the talk on them, newest first.
 * @throws ServiceError not-found
 */
export async function claimActivity(
	ctx: GroupContext,
	number: number,
	kind: ActivityKind | null = null
): Promise<ClaimActivity> {
	const { read } = ctx.db;
	const claim = await findClaim(read, ctx, number);
	const about = and(eq(audit.groupId, ctx.group.id), eq(audit.claimId, claim.id));
	const which = and(about, kind ? inArray(audit.action, actionsOf(kind)) : undefined);
	const actions = await read.selectDistinct({ action: audit.action }).from(audit).where(about);
	const total = await read.$count(audit, which);
	return {
		entries: await activityEntries(ctx, which, { limit: MOST_ENTRIES }),
		more: Math.max(0, total - MOST_ENTRIES),
		kinds: ACTIVITY_KINDS.filter((each) =>
			actions.some(({ action }) => actionsOf(each).includes(action))
		)
	};
}
