import { and, eq } from 'drizzle-orm';
import type { CommentSubject } from '../../../ledger/comments';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { claims, tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import { isVisibleToGroup } from '../inequalities/visibility';

export interface FoundSubject {
	readonly claimId?: string;
	readonly taskId?: string;
	/** Whose it is: they are told of comments on it. */
	readonly concerned: readonly string[];
}

/** @throws ServiceError not-found, also for what is another group's */
export async function findSubject(
	read: Reader,
	ctx: GroupContext,
	subject: CommentSubject,
	id: string
): Promise<FoundSubject> {
	const found = await FIND[subject](read, ctx, id);
	if (!found) throw new ServiceError('not-found', `There is no such ${subject}.`);
	return found;
}

type Find = (read: Reader, ctx: GroupContext, id: string) => Promise<FoundSubject | null>;

const FIND: Readonly<Record<CommentSubject, Find>> = {
	async claim(read, ctx, id) {
		const [claim] = await read
			.select({ createdBy: claims.createdBy })
			.from(claims)
			.where(and(eq(claims.id, id), eq(claims.groupId, ctx.group.id)));
		return claim ? { claimId: id, concerned: [claim.createdBy] } : null;
	},
	async task(read, ctx, id) {
		const [task] = await read
			.select({
				claimId: tasks.claimId,
				createdBy: tasks.createdBy,
				assigneeId: tasks.assigneeId,
				enteredBy: claims.createdBy
			})
			.from(tasks)
			.innerJoin(claims, eq(claims.id, tasks.claimId))
			.where(and(eq(tasks.id, id), eq(tasks.groupId, ctx.group.id)));
		if (!task) return null;
		const { claimId, createdBy, assigneeId, enteredBy } = task;
		const people = [createdBy, enteredBy, ...(assigneeId ? [assigneeId] : [])];
		return { claimId, taskId: id, concerned: people };
	},
	async inequality(read, ctx, id) {
		return (await isVisibleToGroup(read, id, ctx.group.id)) ? { concerned: [] } : null;
	}
};
