import { and, asc, desc, eq, inArray } from 'drizzle-orm';
import { isOverdue } from '../../../ledger/tasks';
import type { TaskMark } from '../../../schemas/task-views';
import type { Reader } from '../../db/client';
import { tasks, users } from '../../db/schema';
import { activeTask } from './task-conditions';

/**
 * Per claim the task that waits on it and was changed last, with how many more there are.
 * @param today `YYYY-MM-DD`
 */
export async function taskMarks(
	read: Reader,
	claimIds: readonly string[],
	today: string
): Promise<Map<string, TaskMark>> {
	const marks = new Map<string, TaskMark>();
	if (claimIds.length === 0) return marks;
	const rows = await read
		.select({ task: tasks, assignee: users.name })
		.from(tasks)
		.leftJoin(users, eq(users.id, tasks.assigneeId))
		.where(and(inArray(tasks.claimId, [...claimIds]), activeTask))
		.orderBy(desc(tasks.updatedAt), asc(tasks.number));
	for (const { task, assignee } of rows) {
		const { claimId, number, kind, state, dueOn } = task;
		const shown = marks.get(claimId);
		const overdue = isOverdue(dueOn, state, today);
		marks.set(
			claimId,
			shown
				? { ...shown, more: shown.more + 1 }
				: { number, kind, state, assignee, dueOn, overdue, more: 0 }
		);
	}
	return marks;
}
