import { and, asc, count, desc, eq, isNull, or, sql, type SQL } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { TASK_STATES, dayOf, isActiveTask, type TaskState } from '../../../ledger/tasks';
import { pageWithin } from '../../../schemas/page-within';
import {
	TASK_BOARD_SIZE,
	TASK_PAGE_SIZE,
	type TASK_SORTS,
	type TaskQuery
} from '../../../schemas/task-input';
import type { TasksPage } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import { claims, inequalities, references, tasks } from '../../db/schema';
import { contains, searchWords } from '../search-words';
import { overdueTask, taskInState, tasksOfPerson, waitsFor } from './task-conditions';
import { peopleForTasks } from './people-for-tasks';
import { assignees, selectTaskRows, taskRow } from './task-rows';

/** One page of a group's tasks: searched, filtered, sorted and counted by the database. */
export async function listTasks(ctx: GroupContext, query: TaskQuery): Promise<TasksPage> {
	const { read } = ctx.db;
	const today = dayOf(ctx.now());
	const inGroup = eq(tasks.groupId, ctx.group.id);
	const filters = and(
		inGroup,
		query.kind ? eq(tasks.kind, query.kind) : undefined,
		assigned(ctx, query.assignee),
		query.overdue ? overdueTask(today) : undefined,
		...searchWords(query.search).map(matches)
	);
	const byState = await read
		.select({ state: tasks.state, count: count() })
		.from(tasks)
		.innerJoin(claims, eq(claims.id, tasks.claimId))
		.innerJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(assignees, eq(assignees.id, tasks.assigneeId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.where(filters)
		.groupBy(tasks.state);
	const counts = countsOf(byState);
	const total = TASK_STATES.filter((state) => isListed(query.state, state)).reduce(
		(sum, state) => sum + counts[state],
		0
	);
	const pageSize = query.view === 'board' ? TASK_BOARD_SIZE : TASK_PAGE_SIZE;
	const page = pageWithin(query.page, total, pageSize);
	const selected = await selectTaskRows(read, and(filters, taskInState(query.state)))
		.orderBy(...ORDERS[query.sort])
		.limit(pageSize)
		.offset((page - 1) * pageSize);
	const counted = (where: SQL | undefined) => read.$count(tasks, and(inGroup, where));
	return {
		rows: selected.map((row) => taskRow(row, ctx.now())),
		total,
		page,
		pageSize,
		counts,
		people: await peopleForTasks(read, ctx.group.id),
		mine: await counted(tasksOfPerson(ctx.actor.id)),
		toDecide: may(ctx.role, 'decide-task') ? await counted(waitsFor(read, ctx.actor.id)) : 0,
		overdue: await counted(overdueTask(today))
	};
}

function isListed(asked: TaskQuery['state'], state: TaskState): boolean {
	return asked === 'all' || (asked === 'active' ? isActiveTask(state) : asked === state);
}

function assigned(ctx: GroupContext, asked: string): SQL | undefined {
	if (asked === '') return undefined;
	if (asked === 'nobody') return isNull(tasks.assigneeId);
	return eq(tasks.assigneeId, asked === 'me' ? ctx.actor.id : asked);
}

/** Each word must occur somewhere in what the row shows. */
function matches(word: string): SQL | undefined {
	const number = /^#?(\d{1,9})$/.exec(word)?.[1];
	return or(
		contains(tasks.instructions, word),
		contains(claims.subject, word),
		contains(claims.quantityLabel, word),
		contains(claims.printed, word),
		contains(claims.locator, word),
		contains(references.short, word),
		contains(inequalities.name, word),
		contains(assignees.name, word),
		number ? eq(tasks.number, Number(number)) : undefined,
		number ? eq(claims.number, Number(number)) : undefined
	);
}

/** Ties go by number, so that pages never overlap. */
const ORDERS: Readonly<Record<(typeof TASK_SORTS)[number], SQL[]>> = {
	due: [asc(sql`${tasks.dueOn} is null`), asc(tasks.dueOn), asc(tasks.number)],
	newest: [desc(tasks.createdAt), desc(tasks.number)],
	changed: [desc(tasks.updatedAt), desc(tasks.number)],
	number: [asc(tasks.number)]
};

function countsOf(
	rows: readonly { readonly state: TaskState; readonly count: number }[]
): Record<TaskState, number> {
	const of = (state: TaskState) => rows.find((row) => row.state === state)?.count ?? 0;
	return {
		open: of('open'),
		assigned: of('assigned'),
		'in-progress': of('in-progress'),
		submitted: of('submitted'),
		returned: of('returned'),
		accepted: of('accepted'),
		cancelled: of('cancelled')
	};
}
