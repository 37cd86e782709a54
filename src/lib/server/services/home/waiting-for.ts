import { and, count, eq, exists, inArray, ne, or } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { TaskState } from '../../../ledger/tasks';
import type { GroupContext } from '../../context';
import { submissions, tasks } from '../../db/schema';

/** States in which the next step is the assignee's; a submitted task waits for somebody else. */
export const ASSIGNEE_TO_ACT = [
	'assigned',
	'in-progress',
	'returned'
] as const satisfies readonly TaskState[];

/**
 * How many of the group's tasks wait for the actor: theirs to do, and submissions of others that
 * they may accept or return. For the navigation, so one query.
 */
export async function waitingFor(ctx: GroupContext): Promise<number> {
	const { read } = ctx.db;
	const toDecide = exists(
		read
			.select({ id: submissions.id })
			.from(submissions)
			.where(
				and(
					eq(submissions.taskId, tasks.id),
					eq(submissions.state, 'waiting'),
					ne(submissions.submittedBy, ctx.actor.id)
				)
			)
	);
	const [row] = await read
		.select({ total: count() })
		.from(tasks)
		.where(
			and(
				eq(tasks.groupId, ctx.group.id),
				or(
					and(eq(tasks.assigneeId, ctx.actor.id), inArray(tasks.state, [...ASSIGNEE_TO_ACT])),
					may(ctx.role, 'decide-task') ? and(eq(tasks.state, 'submitted'), toDecide) : undefined
				)
			)
		);
	return row?.total ?? 0;
}
