import { eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { authorMessages } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { findAuthorMessage } from './find-author-message';

/** Takes up again an author's message that was dealt with; once more changes nothing. */
export async function reopenAuthorMessage(ctx: GroupContext, id: string): Promise<void> {
	if (!may(ctx.role, 'handle-author-message')) {
		throw new ServiceError('forbidden', 'Only maintainers deal with what authors write.');
	}
	await ctx.db.write(async (tx) => {
		const { claimId, handledBy, handledAt } = await findAuthorMessage(tx, ctx, id);
		if (handledAt === null) return;
		const waiting = { handledBy: null, handledAt: null };
		await tx.update(authorMessages).set(waiting).where(eq(authorMessages.id, id));
		await recordAudit(tx, ctx, {
			action: 'author-message.reopened',
			entity: 'author-message',
			entityId: id,
			groupId: ctx.group.id,
			claimId,
			before: { handledBy, handledAt },
			after: waiting
		});
	});
}
