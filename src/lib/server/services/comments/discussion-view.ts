import { and, asc, desc, eq, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { CommentSubject } from '../../../ledger/comments';
import { handlesOf, type Handle } from '../../../ledger/mentions';
import { may } from '../../../ledger/policy';
import type { CommentView, DiscussionView } from '../../../schemas/talk-views';
import type { GroupContext } from '../../context';
import { commentMentions, comments, commentVersions, users } from '../../db/schema';
import { renderMarkdown } from '../../markdown/render-markdown';
import { isFresh } from './edit-comment';
import { findSubject } from './find-subject';
import { groupHandles } from './group-handles';

/** What was said on a claim, task or inequality within the group. @throws ServiceError not-found */
export async function discussionView(
	ctx: GroupContext,
	subject: CommentSubject,
	subjectId: string
): Promise<DiscussionView> {
	const { read } = ctx.db;
	await findSubject(read, ctx, subject, subjectId);
	const remover = alias(users, 'remover');
	const rows = await read
		.select({ comment: comments, author: users.name, removedBy: remover.name })
		.from(comments)
		.innerJoin(users, eq(users.id, comments.authorId))
		.leftJoin(remover, eq(remover.id, comments.removedBy))
		.where(
			and(
				eq(comments.groupId, ctx.group.id),
				eq(comments.subject, subject),
				eq(comments.subjectId, subjectId)
			)
		)
		.orderBy(asc(comments.createdAt), asc(comments.id));
	const ids = rows.map(({ comment }) => comment.id);
	const mentions = await mentionsOf(ctx, ids);
	const versions = await read
		.select()
		.from(commentVersions)
		.where(inArray(commentVersions.commentId, ids))
		.orderBy(desc(commentVersions.until), desc(commentVersions.id));
	const handles = await groupHandles(read, ctx);
	return {
		subject,
		subjectId,
		comments: rows.map(({ comment, author, removedBy }): CommentView => {
			const own = comment.authorId === ctx.actor.id;
			const there = comment.removedAt === null;
			const mentioned = mentions.get(comment.id) ?? [];
			return {
				id: comment.id,
				author: { id: comment.authorId, name: author },
				html: renderMarkdown(comment.body, mentioned),
				body: own ? comment.body : '',
				at: comment.createdAt.toISOString(),
				editedAt: comment.editedAt?.toISOString() ?? null,
				versions: versions
					.filter(({ commentId }) => commentId === comment.id)
					.map(({ body, until }) => ({
						html: renderMarkdown(body, mentioned),
						until: until.toISOString()
					})),
				removedBy: there ? null : (removedBy ?? author),
				mayEdit: there && may(ctx.role, 'edit-comment', { own }),
				mayRemove: there && may(ctx.role, 'remove-comment', { own }),
				fresh: isFresh(comment, ctx.now())
			};
		}),
		mayComment: may(ctx.role, 'comment'),
		handles: handles
			.filter(({ id, offered }) => offered && id !== ctx.actor.id)
			.map(({ handle, name }) => ({ handle, name }))
	};
}

/** Who each comment mentions, as it was resolved when written. */
async function mentionsOf(
	{ db }: GroupContext,
	ids: readonly string[]
): Promise<ReadonlyMap<string, readonly Handle[]>> {
	const rows = await db.read
		.select({
			commentId: commentMentions.commentId,
			handle: commentMentions.handle,
			id: users.id,
			name: users.name
		})
		.from(commentMentions)
		.innerJoin(users, eq(users.id, commentMentions.userId))
		.where(inArray(commentMentions.commentId, [...ids]));
	const found = new Map<string, Handle[]>();
	for (const { commentId, handle, id, name } of rows) {
		// Who is mentioned is so by the first name and by the whole one.
		const usual = handlesOf([{ id, name }]);
		const known = usual.some((one) => one.handle === handle)
			? usual
			: [{ handle, id, name, offered: true }];
		found.set(commentId, [...(found.get(commentId) ?? []), ...known]);
	}
	return found;
}
