import { and, eq, inArray, isNotNull, lt, ne, notExists, sql, type SQL } from 'drizzle-orm';
import { ACTIVE_TASK_STATES } from '../../../ledger/tasks';
import type { Reader } from '../../db/client';
import { submissions, tasks } from '../../db/schema';

/** As `isOverdue` of the ledger says it. */
export const overdueTask = (today: string): SQL | undefined =>
	and(
		isNotNull(tasks.dueOn),
		lt(tasks.dueOn, today),
		inArray(tasks.state, [...ACTIVE_TASK_STATES]),
		ne(tasks.state, 'submitted')
	);

export const activeTask = inArray(tasks.state, [...ACTIVE_TASK_STATES]);

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
