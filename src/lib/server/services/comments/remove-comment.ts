import { eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { commentMentions, comments, commentVersions } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { findComment } from './find-comment';
import { findSubject } from './find-subject';

const REFUSAL = 'Only who wrote a comment and maintainers may remove it.';

/**
 * Takes a comment's texts away, all of them; that there was one, and who removed it, stays.
 * @throws ServiceError forbidden, not-found
 */
export async function removeComment(ctx: GroupContext, id: string): Promise<void> {
	if (!may(ctx.role, 'remove-comment', { own: true })) {
		throw new ServiceError('forbidden', REFUSAL);
	}
	await ctx.db.write(async (tx) => {
		const comment = await findComment(tx, ctx, id);
		if (!may(ctx.role, 'remove-comment', { own: comment.authorId === ctx.actor.id })) {
			throw new ServiceError('forbidden', REFUSAL);
		}
		if (comment.removedAt) return;
		const { subject, subjectId, body } = comment;
		const { claimId } = await findSubject(tx, ctx, subject, subjectId);
		await tx
			.update(comments)
			.set({ body: '', removedBy: ctx.actor.id, removedAt: ctx.now() })
			.where(eq(comments.id, id));
		await tx.delete(commentVersions).where(eq(commentVersions.commentId, id));
		await tx.delete(commentMentions).where(eq(commentMentions.commentId, id));
		await recordAudit(tx, ctx, {
			action: 'comment.removed',
			entity: 'comment',
			entityId: id,
			groupId: ctx.group.id,
			claimId,
			before: { body },
			after: { subject, subjectId }
		});
	});
}
