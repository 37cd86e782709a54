import { and, count, desc, eq, isNull } from 'drizzle-orm';
import type { NewsPage } from '../../../schemas/talk-views';
import { pageWithin } from '../../../schemas/page-within';
import type { UserContext } from '../../context';
import { memberships, notifications } from '../../db/schema';
import { factsOf, selectFacts } from './notification-facts';
import { notificationText } from './notification-text';

const PAGE_SIZE = 30;

/** What is new for a person, newest first, in the groups they are in. */
export async function listNews(ctx: UserContext, page: number): Promise<NewsPage> {
	const { read } = ctx.db;
	const own = eq(notifications.userId, ctx.actor.id);
	const total = await countOf(ctx, false);
	const wanted = pageWithin(page, total, PAGE_SIZE);
	const rows = await selectFacts(read)
		.where(own)
		.orderBy(desc(notifications.createdAt), desc(notifications.id))
		.limit(PAGE_SIZE)
		.offset((wanted - 1) * PAGE_SIZE);
	return {
		items: rows.map(factsOf).map((facts) => ({
			id: facts.id,
			kind: facts.kind,
			at: facts.at.toISOString(),
			unread: facts.unread,
			groupName: facts.group.name,
			...notificationText(facts)
		})),
		unread: await unreadCount(ctx),
		total,
		page: wanted,
		pageSize: PAGE_SIZE
	};
}

/** For the header; of groups the person is still in. */
export function unreadCount(ctx: UserContext): Promise<number> {
	return countOf(ctx, true);
}

async function countOf(ctx: UserContext, unread: boolean): Promise<number> {
	const [row] = await ctx.db.read
		.select({ total: count() })
		.from(notifications)
		.innerJoin(
			memberships,
			and(
				eq(memberships.groupId, notifications.groupId),
				eq(memberships.userId, notifications.userId)
			)
		)
		.where(
			and(eq(notifications.userId, ctx.actor.id), unread ? isNull(notifications.readAt) : undefined)
		);
	return row?.total ?? 0;
}
