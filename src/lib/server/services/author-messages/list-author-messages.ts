import { desc, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { AuthorMessageView } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import { authorMessages, users } from '../../db/schema';
import { ServiceError } from '../../errors';
import { renderMarkdown } from '../../markdown/render-markdown';
import { findClaim } from '../claims/find-claim';

/** More than a claim has room for; the oldest are dealt with long before. */
const SHOWN = 100;

/** What authors wrote about a claim, newest first; for maintainers. */
export async function listAuthorMessages(
	ctx: GroupContext,
	number: number
): Promise<AuthorMessageView[]> {
	if (!may(ctx.role, 'handle-author-message')) {
		throw new ServiceError('forbidden', 'Only maintainers read what authors write.');
	}
	const claim = await findClaim(ctx.db.read, ctx, number);
	const rows = await ctx.db.read
		.select({ message: authorMessages, handler: users.name })
		.from(authorMessages)
		.leftJoin(users, eq(users.id, authorMessages.handledBy))
		.where(eq(authorMessages.claimId, claim.id))
		.orderBy(desc(authorMessages.sentAt), desc(authorMessages.id))
		.limit(SHOWN);
	return rows.map(({ message, handler }) => ({
		id: message.id,
		name: message.name,
		email: message.email,
		message: message.message,
		messageHtml: renderMarkdown(message.message),
		at: message.sentAt.toISOString(),
		handledBy: message.handledBy ? { id: message.handledBy, name: handler ?? '' } : null,
		handledAt: message.handledAt?.toISOString() ?? null
	}));
}
