import { and, eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { authorMessages, claims } from '../../db/schema';
import { ServiceError } from '../../errors';

/** @throws ServiceError not-found, also for a message to another group */
export async function findAuthorMessage(read: Reader, ctx: GroupContext, id: string) {
	const [found] = await read
		.select({
			claimId: claims.id,
			handledBy: authorMessages.handledBy,
			handledAt: authorMessages.handledAt
		})
		.from(authorMessages)
		.innerJoin(claims, eq(claims.id, authorMessages.claimId))
		.where(and(eq(authorMessages.id, id), eq(claims.groupId, ctx.group.id)));
	if (!found) throw new ServiceError('not-found', 'There is no such message in this group.');
	return found;
}
