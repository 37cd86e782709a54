import { and, asc, eq, isNotNull, isNull } from 'drizzle-orm';
import { dueDatesCalendar } from '../../calendar/due-dates-calendar';
import { config } from '../../config';
import type { Context } from '../../context';
import type { Reader } from '../../db/client';
import {
	calendarFeeds,
	claims,
	groups,
	inequalities,
	memberships,
	references,
	tasks,
	users
} from '../../db/schema';
import { ServiceError } from '../../errors';
import { hashToken } from '../../ids';
import { activeTask } from '../tasks/task-conditions';

/** Due dates a calendar holds, the soonest: a year of them in a large group is far from this. */
const MOST_DUE_DATES = 1_000;

/**
 * The calendar behind a secret address, as iCalendar text. What it may show is decided at every
 * reading: of a group that its maker has left it shows nothing.
 * @throws ServiceError not-found: no such address, revoked, or its maker is no more in the group
 */
export async function readFeed(ctx: Context, token: string): Promise<string> {
	const { read } = ctx.db;
	const [feed] = await read
		.select({
			userId: calendarFeeds.userId,
			groupId: calendarFeeds.groupId,
			member: memberships.userId,
			slug: groups.slug,
			name: groups.name
		})
		.from(calendarFeeds)
		.leftJoin(groups, eq(groups.id, calendarFeeds.groupId))
		.leftJoin(
			memberships,
			and(
				eq(memberships.groupId, calendarFeeds.groupId),
				eq(memberships.userId, calendarFeeds.userId)
			)
		)
		.where(and(eq(calendarFeeds.tokenHash, hashToken(token)), isNull(calendarFeeds.revokedAt)));
	if (!feed || (feed.groupId !== null && feed.member === null)) {
		throw new ServiceError('not-found', 'There is no calendar at this address.');
	}
	const { origin } = config();
	return dueDatesCalendar({
		name: feed.name === null ? 'My tasks on Merestone' : `Tasks of ${feed.name}`,
		address: feed.slug === null ? `${origin}/home/tasks` : `${origin}/g/${feed.slug}/tasks`,
		origin,
		tasks: await dueTasks(read, feed)
	});
}

function dueTasks(
	read: Reader,
	{ userId, groupId }: { readonly userId: string; readonly groupId: string | null }
) {
	return read
		.select({
			id: tasks.id,
			number: tasks.number,
			version: tasks.version,
			kind: tasks.kind,
			state: tasks.state,
			dueOn: tasks.dueOn,
			updatedAt: tasks.updatedAt,
			assignee: users.name,
			groupSlug: groups.slug,
			groupName: groups.name,
			claimNumber: claims.number,
			quantity: claims.quantityLabel,
			subject: claims.subject,
			inequality: inequalities.name,
			relation: claims.relation,
			printed: claims.printed,
			paper: references.short,
			locator: claims.locator
		})
		.from(tasks)
		.innerJoin(groups, eq(groups.id, tasks.groupId))
		.innerJoin(
			memberships,
			and(eq(memberships.groupId, tasks.groupId), eq(memberships.userId, userId))
		)
		.innerJoin(claims, eq(claims.id, tasks.claimId))
		.innerJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.leftJoin(users, eq(users.id, tasks.assigneeId))
		.where(
			and(
				groupId === null ? eq(tasks.assigneeId, userId) : eq(tasks.groupId, groupId),
				activeTask,
				isNotNull(tasks.dueOn)
			)
		)
		.orderBy(asc(tasks.dueOn), asc(tasks.id))
		.limit(MOST_DUE_DATES);
}
