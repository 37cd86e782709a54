import { and, eq, isNull } from 'drizzle-orm';
import type { UserContext } from '../../context';
import { calendarFeeds } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';

/**
 * Ends one of the actor's calendar addresses; whoever reads it from now on finds nothing.
 * @throws ServiceError not-found: revoked already, or not theirs
 */
export async function revokeFeed(ctx: UserContext, id: string): Promise<void> {
	await ctx.db.write(async (tx) => {
		const [revoked] = await tx
			.update(calendarFeeds)
			.set({ revokedAt: ctx.now() })
			.where(
				and(
					eq(calendarFeeds.id, id),
					eq(calendarFeeds.userId, ctx.actor.id),
					isNull(calendarFeeds.revokedAt)
				)
			)
			.returning({ groupId: calendarFeeds.groupId });
		if (!revoked) {
			throw new ServiceError('not-found', 'This calendar address is revoked already.');
		}
		await recordAudit(tx, ctx, {
			action: 'calendar.revoked',
			entity: 'calendar-feed',
			entityId: id,
			before: revoked
		});
	});
}
