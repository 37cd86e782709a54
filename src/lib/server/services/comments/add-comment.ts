import { and, eq, isNull } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { addCommentInput, type AddCommentInput } from '../../../schemas/comment-input';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { comments } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { recordAudit } from '../audit';
import { notify } from '../notifications/notify';
import { parseInput } from '../parse-input';
import { findSubject } from './find-subject';
import { storeMentions } from './store-mentions';

export const MAY_NOT_COMMENT = 'Commenting takes the role of a member.';

/**
 * Says something on a claim, task or inequality of the group. Who is mentioned is told so; whose
 * it is and who has commented on it before is told of the comment.
 * @throws ServiceError forbidden, invalid, not-found
 */
export async function addComment(
	ctx: GroupContext,
	input: AddCommentInput
): Promise<{ readonly id: string }> {
	if (!may(ctx.role, 'comment')) throw new ServiceError('forbidden', MAY_NOT_COMMENT);
	const { subject, subjectId, body } = parseInput(addCommentInput, input);
	const id = newId();
	await ctx.db.write(async (tx) => {
		const { claimId, taskId, concerned } = await findSubject(tx, ctx, subject, subjectId);
		const earlier = await commenters(tx, ctx, subject, subjectId);
		await tx.insert(comments).values({
			id,
			groupId: ctx.group.id,
			subject,
			subjectId,
			authorId: ctx.actor.id,
			body,
			createdAt: ctx.now()
		});
		const { all: mentioned } = await storeMentions(tx, ctx, id, body);
		await recordAudit(tx, ctx, {
			action: 'comment.added',
			entity: 'comment',
			entityId: id,
			groupId: ctx.group.id,
			claimId,
			after: { subject, subjectId, body }
		});
		const about = { groupId: ctx.group.id, event: id, claimId, taskId, commentId: id };
		await notify(tx, ctx, { ...about, kind: 'mention', recipients: mentioned });
		// Who is mentioned is not told a second time.
		const others = [...concerned, ...earlier].filter((person) => !mentioned.includes(person));
		await notify(tx, ctx, { ...about, kind: 'comment', recipients: others });
	});
	return { id };
}

async function commenters(
	tx: Transaction,
	ctx: GroupContext,
	subject: AddCommentInput['subject'],
	subjectId: string
): Promise<readonly string[]> {
	const rows = await tx
		.selectDistinct({ authorId: comments.authorId })
		.from(comments)
		.where(
			and(
				eq(comments.groupId, ctx.group.id),
				eq(comments.subject, subject),
				eq(comments.subjectId, subjectId),
				isNull(comments.removedAt)
			)
		);
	return rows.map(({ authorId }) => authorId);
}
