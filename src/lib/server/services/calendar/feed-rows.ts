import { and, asc, eq, isNull, or } from 'drizzle-orm';
import type { CalendarFeedView } from '../../../schemas/talk-views';
import { config } from '../../config';
import type { Reader } from '../../db/client';
import { calendarFeeds, groups, memberships } from '../../db/schema';
import { derivedToken } from '../../derived-token';
import { hashToken } from '../../ids';

const PURPOSE = 'calendar';

/** What stands in a feed's address, and what the database keeps of it. */
const feedToken = (id: string) => derivedToken(PURPOSE, id);
export const feedTokenHash = (id: string) => hashToken(feedToken(id));

/** A person's standing addresses, their own tasks' first; those of groups they left are dead. */
export async function feedsOf(read: Reader, userId: string): Promise<CalendarFeedView[]> {
	const rows = await read
		.select({
			id: calendarFeeds.id,
			tokenHash: calendarFeeds.tokenHash,
			createdAt: calendarFeeds.createdAt,
			slug: groups.slug,
			name: groups.name
		})
		.from(calendarFeeds)
		.leftJoin(groups, eq(groups.id, calendarFeeds.groupId))
		.leftJoin(
			memberships,
			and(eq(memberships.groupId, calendarFeeds.groupId), eq(memberships.userId, userId))
		)
		.where(
			and(
				eq(calendarFeeds.userId, userId),
				isNull(calendarFeeds.revokedAt),
				or(isNull(calendarFeeds.groupId), eq(memberships.userId, userId))
			)
		)
		.orderBy(asc(groups.name), asc(calendarFeeds.createdAt));
	return rows.map(({ id, tokenHash, createdAt, slug, name }) => ({
		id,
		groupSlug: slug,
		groupName: name,
		address: feedTokenHash(id) === tokenHash ? feedAddress(id) : null,
		createdAt: createdAt.toISOString()
	}));
}

function feedAddress(id: string): string {
	return `${config().origin}/calendar/${feedToken(id)}.ics`;
}
