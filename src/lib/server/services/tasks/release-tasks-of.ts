import { and, asc, eq, inArray } from 'drizzle-orm';
import { PRODUCT } from '../../../ledger/task-life';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { tasks } from '../../db/schema';
import { stepTask } from './step-task';

/**
 * Somebody leaves the group, or only observes from now on: what they had is open to all again. What
 * they submitted stays to be accepted or returned; when it is returned it is open to all, too.
 */
export async function releaseTasksOf(
	tx: Transaction,
	ctx: GroupContext,
	userId: string
): Promise<void> {
	const theirs = await tx
		.select()
		.from(tasks)
		.where(
			and(
				eq(tasks.groupId, ctx.group.id),
				eq(tasks.assigneeId, userId),
				inArray(tasks.state, ['assigned', 'in-progress', 'returned'])
			)
		)
		.orderBy(asc(tasks.number));
	for (const task of theirs) {
		await stepTask(tx, ctx, task, { kind: 'release' }, PRODUCT, { audit: 'task.released' });
	}
}
