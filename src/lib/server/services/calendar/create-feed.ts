import { and, eq, isNull } from 'drizzle-orm';
import type { CalendarFeedView } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { calendarFeeds } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { groupContext } from '../groups/group-context';
import { feedsOf, feedTokenHash } from './feed-rows';

/**
 * Makes the secret address of a calendar: of the actor's own tasks, or of all tasks of one of
 * their groups. There is one of each; asking again gives the one that stands.
 * @throws ServiceError not-found: no such group, or not one of theirs
 */
export async function createFeed(
	ctx: UserContext,
	{ groupSlug }: { readonly groupSlug?: string } = {}
): Promise<CalendarFeedView> {
	const inside = groupSlug ? await groupContext(ctx, { slug: groupSlug }) : null;
	if (groupSlug && !inside) {
		throw new ServiceError('not-found', 'There is no such group, or you are not in it.');
	}
	const groupId = inside?.group.id ?? null;
	const id = await ctx.db.write(async (tx) => {
		const [standing] = await tx
			.select({ id: calendarFeeds.id, tokenHash: calendarFeeds.tokenHash })
			.from(calendarFeeds)
			.where(
				and(
					eq(calendarFeeds.userId, ctx.actor.id),
					groupId ? eq(calendarFeeds.groupId, groupId) : isNull(calendarFeeds.groupId),
					isNull(calendarFeeds.revokedAt)
				)
			);
		if (standing) return standing.id;
		const made = newId();
		await tx.insert(calendarFeeds).values({
			id: made,
			tokenHash: feedTokenHash(made),
			userId: ctx.actor.id,
			groupId,
			createdAt: ctx.now()
		});
		// A person's own matter: it stands in no group's activity.
		await recordAudit(tx, ctx, {
			action: 'calendar.created',
			entity: 'calendar-feed',
			entityId: made,
			after: { groupId }
		});
		return made;
	});
	const feed = (await feedsOf(ctx.db.read, ctx.actor.id)).find((each) => each.id === id);
	if (!feed) throw new ServiceError('conflict', 'The address was revoked at this moment.');
	return feed;
}
