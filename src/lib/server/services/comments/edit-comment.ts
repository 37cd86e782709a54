import { eq } from 'drizzle-orm';
import { EDIT_MINUTES } from '../../../ledger/comments';
import { may } from '../../../ledger/policy';
import { editCommentInput } from '../../../schemas/comment-input';
import type { GroupContext } from '../../context';
import { comments, commentVersions } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { notify } from '../notifications/notify';
import { parseInput } from '../parse-input';
import { findComment, type CommentRow } from './find-comment';
import { findSubject } from './find-subject';
import { storeMentions } from './store-mentions';

const REFUSAL = 'Only who wrote a comment may change it.';

/** Whether an edit now leaves no trace for readers. */
export function isFresh({ createdAt }: Pick<CommentRow, 'createdAt'>, now: Date): boolean {
	return now.getTime() - createdAt.getTime() <= EDIT_MINUTES * 60_000;
}

/**
 * Changes one's own comment. In the first minutes the new text takes the old one's place; later
 * the old one stays readable. Who is mentioned only now is told so.
 * @throws ServiceError forbidden, invalid, not-found, conflict (it is removed)
 */
export async function editComment(ctx: GroupContext, id: string, text: string): Promise<void> {
	// Who may not even change a comment of their own learns no more.
	if (!may(ctx.role, 'edit-comment', { own: true })) throw new ServiceError('forbidden', REFUSAL);
	const { body } = parseInput(editCommentInput, { id, body: text });
	await ctx.db.write(async (tx) => {
		const comment = await findComment(tx, ctx, id);
		if (!may(ctx.role, 'edit-comment', { own: comment.authorId === ctx.actor.id })) {
			throw new ServiceError('forbidden', REFUSAL);
		}
		if (comment.removedAt) throw new ServiceError('conflict', 'This comment is removed.');
		if (comment.body === body) return;
		const now = ctx.now();
		const fresh = isFresh(comment, now);
		if (!fresh) {
			await tx
				.insert(commentVersions)
				.values({ id: newId(), commentId: id, body: comment.body, until: now });
		}
		await tx
			.update(comments)
			.set({ body, ...(fresh ? {} : { editedAt: now }) })
			.where(eq(comments.id, id));
		const { added } = await storeMentions(tx, ctx, id, body);
		const { claimId, taskId } = await findSubject(tx, ctx, comment.subject, comment.subjectId);
		await recordAudit(tx, ctx, {
			action: 'comment.edited',
			entity: 'comment',
			entityId: id,
			groupId: ctx.group.id,
			claimId,
			before: { body: comment.body },
			after: { subject: comment.subject, subjectId: comment.subjectId, body }
		});
		await notify(tx, ctx, {
			kind: 'mention',
			groupId: ctx.group.id,
			event: id,
			recipients: added,
			claimId,
			taskId,
			commentId: id
		});
	});
}
