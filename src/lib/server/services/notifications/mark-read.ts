import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { UserContext } from '../../context';
import { notifications } from '../../db/schema';
import { ServiceError } from '../../errors';
import { factsOf, selectFacts } from './notification-facts';
import { notificationText } from './notification-text';

const MOST_AT_ONCE = 100;

/** Marks one's own notifications as read; those of others and unknown ones are passed over. */
export async function markRead(ctx: UserContext, ids: readonly string[] | 'all'): Promise<number> {
	if (ids.length === 0) return 0;
	if (ids !== 'all' && ids.length > MOST_AT_ONCE) {
		throw new ServiceError('invalid', `At most ${MOST_AT_ONCE} at once.`);
	}
	const marked = await ctx.db.write((tx) =>
		tx
			.update(notifications)
			.set({ readAt: ctx.now() })
			.where(
				and(
					eq(notifications.userId, ctx.actor.id),
					isNull(notifications.readAt),
					ids === 'all' ? undefined : inArray(notifications.id, [...ids])
				)
			)
			.returning({ id: notifications.id })
	);
	return marked.length;
}

/**
 * Marks one as read and says where it leads.
 * @throws ServiceError not-found, also for another person's
 */
export async function openNotification(ctx: UserContext, id: string): Promise<{ href: string }> {
	const [row] = await selectFacts(ctx.db.read).where(
		and(eq(notifications.id, id), eq(notifications.userId, ctx.actor.id))
	);
	if (!row) throw new ServiceError('not-found', 'This is no longer here.');
	await markRead(ctx, [id]);
	return { href: notificationText(factsOf(row)).href };
}
