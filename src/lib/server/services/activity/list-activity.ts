import { and, asc, eq, gte, inArray, lt } from 'drizzle-orm';
import { pageWithin } from '../../../schemas/page-within';
import { ACTIVITY_PAGE_SIZE, type ActivityQuery } from '../../../schemas/activity-query';
import type { ActivityPage } from '../../../schemas/talk-views';
import type { GroupContext } from '../../context';
import { audit, claims, users } from '../../db/schema';
import { activityEntries } from './activity-entries';
import { actionsOf } from './activity-sentence';

const DAY_MS = 86_400_000;

/** A page of what happened in a group, newest first, filtered and counted by the database. */
export async function listActivity(ctx: GroupContext, query: ActivityQuery): Promise<ActivityPage> {
	const { read } = ctx.db;
	const here = eq(audit.groupId, ctx.group.id);
	const ofClaim = read
		.select({ id: claims.id })
		.from(claims)
		.where(and(eq(claims.groupId, ctx.group.id), eq(claims.number, query.claim ?? 0)));
	const which = and(
		here,
		query.kind === 'all' ? undefined : inArray(audit.action, actionsOf(query.kind)),
		query.person ? eq(audit.actorId, query.person) : undefined,
		query.claim === null ? undefined : inArray(audit.claimId, ofClaim),
		query.from ? gte(audit.at, new Date(query.from)) : undefined,
		query.to ? lt(audit.at, new Date(Date.parse(query.to) + DAY_MS)) : undefined
	);
	const total = await read.$count(audit, which);
	const page = pageWithin(query.page, total, ACTIVITY_PAGE_SIZE);
	const people = await read
		.selectDistinct({ id: users.id, name: users.name })
		.from(audit)
		.innerJoin(users, eq(users.id, audit.actorId))
		.where(here)
		.orderBy(asc(users.name), asc(users.id));
	return {
		entries: await activityEntries(ctx, which, {
			limit: ACTIVITY_PAGE_SIZE,
			offset: (page - 1) * ACTIVITY_PAGE_SIZE
		}),
		total,
		page,
		pageSize: ACTIVITY_PAGE_SIZE,
		people
	};
}
