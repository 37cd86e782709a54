import { eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { commentMentions } from '../../db/schema';
import { mentionsIn } from '../../markdown/render-markdown';
import { groupHandles } from './group-handles';

/**
 * Writes down who a comment mentions, so that it stays so when members come and go.
 * @returns ids of those it mentions, and of those it did not mention before
 */
export async function storeMentions(
	tx: Transaction,
	ctx: GroupContext,
	commentId: string,
	body: string
): Promise<{ readonly all: readonly string[]; readonly added: readonly string[] }> {
	const before = await tx
		.delete(commentMentions)
		.where(eq(commentMentions.commentId, commentId))
		.returning({ userId: commentMentions.userId });
	const found = new Map(
		mentionsIn(body, await groupHandles(tx, ctx)).map(({ id, handle }) => [id, handle])
	);
	const all = [...found.keys()];
	if (all.length > 0) {
		await tx
			.insert(commentMentions)
			.values([...found].map(([userId, handle]) => ({ commentId, userId, handle })));
	}
	return { all, added: all.filter((id) => !before.some(({ userId }) => userId === id)) };
}
