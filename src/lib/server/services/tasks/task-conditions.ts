import { and, eq, inArray, isNotNull, lt, notExists, sql, type SQL } from 'drizzle-orm';
import {
	ACTIVE_TASK_STATES,
	TASK_STATES,
	isToDo,
	type TaskStateFilter
} from '../../../ledger/tasks';
import type { Reader } from '../../db/client';
import { submissions, tasks } from '../../db/schema';

export const activeTask = inArray(tasks.state, [...ACTIVE_TASK_STATES]);

/** As `isToDo` of the ledger says it. */
export const taskToDo = inArray(tasks.state, TASK_STATES.filter(isToDo));

/** As `isOverdue` of the ledger says it. */
export const overdueTask = (today: string): SQL | undefined =>
	and(isNotNull(tasks.dueOn), lt(tasks.dueOn, today), taskToDo);

/** The tasks that a list narrowed to this shows. */
export function taskInState(asked: TaskStateFilter): SQL | undefined {
	if (asked === 'all') return undefined;
	return asked === 'active' ? activeTask : eq(tasks.state, asked);
}

/** What somebody has that has not come to its end. */
export const tasksOfPerson = (userId: string): SQL | undefined =>
	and(eq(tasks.assigneeId, userId), activeTask);

/** Submitted by somebody else, where the person decides. */
export function waitsFor(read: Reader, userId: string): SQL | undefined {
	const own = read
		.select({ one: sql`1` })
		.from(submissions)
		.where(
			and(
				eq(submissions.taskId, tasks.id),
				eq(submissions.state, 'waiting'),
				eq(submissions.submittedBy, userId)
			)
		);
	return and(eq(tasks.state, 'submitted'), notExists(own));
}
