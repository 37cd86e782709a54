import { and, eq, isNull } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { authorMessages } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { findAuthorMessage } from './find-author-message';

/** Marks an author's message as dealt with; once more changes nothing. */
export async function handleAuthorMessage(ctx: GroupContext, id: string): Promise<void> {
	if (!may(ctx.role, 'handle-author-message')) {
		throw new ServiceError('forbidden', 'Only maintainers deal with what authors write.');
	}
	await ctx.db.write(async (tx) => {
		const found = await findAuthorMessage(tx, ctx, id);
		const handled = { handledBy: ctx.actor.id, handledAt: ctx.now() };
		const [changed] = await tx
			.update(authorMessages)
			.set(handled)
			.where(and(eq(authorMessages.id, id), isNull(authorMessages.handledAt)))
			.returning({ id: authorMessages.id });
		if (!changed) return;
		await recordAudit(tx, ctx, {
			action: 'author-message.handled',
			entity: 'author-message',
			entityId: id,
			groupId: ctx.group.id,
			claimId: found.claimId,
			before: { handledBy: null, handledAt: null },
			after: handled
		});
	});
}
