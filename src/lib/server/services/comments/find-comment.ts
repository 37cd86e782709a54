import { and, eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { comments } from '../../db/schema';
import { ServiceError } from '../../errors';

export type CommentRow = typeof comments.$inferSelect;

/** @throws ServiceError not-found, also for a comment of another group or on something else */
export async function findComment(
	read: Reader,
	ctx: GroupContext,
	id: string
): Promise<CommentRow> {
	const [row] = await read
		.select()
		.from(comments)
		.where(and(eq(comments.id, id), eq(comments.groupId, ctx.group.id)));
	if (!row) throw new ServiceError('not-found', 'There is no such comment.');
	return row;
}
