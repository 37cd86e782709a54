import { and, count, eq, inArray, or } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { TaskState } from '../../../ledger/tasks';
import type { GroupContext } from '../../context';
import { tasks } from '../../db/schema';
import { waitsFor } from '../tasks/task-conditions';

/** States in which the next step is the assignee's; a submitted task waits for somebody else. */
const ASSIGNEE_TO_ACT = [
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
	const toDo = and(eq(tasks.assigneeId, ctx.actor.id), inArray(tasks.state, [...ASSIGNEE_TO_ACT]));
	const toDecide = may(ctx.role, 'decide-task') ? waitsFor(read, ctx.actor.id) : undefined;
	const [row] = await read
		.select({ total: count() })
		.from(tasks)
		.where(and(eq(tasks.groupId, ctx.group.id), or(toDo, toDecide)));
	return row?.total ?? 0;
}
