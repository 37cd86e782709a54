import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm';
import { dayOf } from '../../../ledger/tasks';
import { pageWithin } from '../../../schemas/page-within';
import { OWN_TASKS_PAGE_SIZE, type OwnTasksQuery } from '../../../schemas/own-tasks-query';
import type { OwnTasksPage } from '../../../schemas/talk-views';
import type { UserContext } from '../../context';
import { tasks } from '../../db/schema';
import { listGroupsOf } from '../groups/list-groups-of';
import { activeTask, overdueTask, taskInState } from '../tasks/task-conditions';
import { selectTaskRows, taskRow } from '../tasks/task-rows';

/** One page of the actor's tasks over all their groups, active ones first, soonest due first. */
export async function listOwnTasks(ctx: UserContext, query: OwnTasksQuery): Promise<OwnTasksPage> {
	const { read } = ctx.db;
	const groups = await listGroupsOf(ctx);
	const overdue = overdueTask(dayOf(ctx.now()));
	const own = and(
		eq(tasks.assigneeId, ctx.actor.id),
		inArray(
			tasks.groupId,
			groups.map(({ id }) => id)
		)
	);
	const asked = groups.find(({ slug }) => slug === query.group);
	const where = and(
		own,
		query.group ? eq(tasks.groupId, asked?.id ?? '') : undefined,
		query.overdue ? overdue : undefined,
		taskInState(query.state)
	);
	const total = await read.$count(tasks, where);
	const page = pageWithin(query.page, total, OWN_TASKS_PAGE_SIZE);
	const selected = await selectTaskRows(read, where)
		.orderBy(
			desc(activeTask),
			asc(sql`${tasks.dueOn} is null`),
			asc(tasks.dueOn),
			desc(tasks.updatedAt),
			asc(tasks.id)
		)
		.limit(OWN_TASKS_PAGE_SIZE)
		.offset((page - 1) * OWN_TASKS_PAGE_SIZE);
	return {
		rows: selected.map((row) => taskRow(row, ctx.now())),
		total,
		page,
		pageSize: OWN_TASKS_PAGE_SIZE,
		overdue: await read.$count(tasks, and(own, overdue)),
		groups: groups.map(({ slug, name }) => ({ slug, name }))
	};
}
