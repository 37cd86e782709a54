import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import { rolesFrom } from '../../../ledger/roles';
import type { TaskRow } from '../../../schemas/task-views';
import type { UserContext } from '../../context';
import { memberships, tasks } from '../../db/schema';
import { tasksOfPerson, waitsFor } from './task-conditions';
import { selectTaskRows, taskRow } from './task-rows';

/** The actor's tasks over all their groups, soonest due first, and what waits for their decision. */
export async function listMyTasks(
	ctx: UserContext
): Promise<{ mine: readonly TaskRow[]; toDecide: readonly TaskRow[] }> {
	const { read } = ctx.db;
	const me = ctx.actor.id;
	const soonest = [asc(sql`${tasks.dueOn} is null`), asc(tasks.dueOn), asc(tasks.createdAt)];
	const memberOf = read
		.select({ id: memberships.groupId })
		.from(memberships)
		.where(eq(memberships.userId, me));
	const decidesIn = read
		.select({ id: memberships.groupId })
		.from(memberships)
		.where(and(eq(memberships.userId, me), inArray(memberships.role, rolesFrom('maintainer'))));
	const mine = await selectTaskRows(
		read,
		and(tasksOfPerson(me), inArray(tasks.groupId, memberOf))
	).orderBy(...soonest);
	const toDecide = await selectTaskRows(
		read,
		and(waitsFor(read, me), inArray(tasks.groupId, decidesIn))
	).orderBy(asc(tasks.updatedAt), asc(tasks.number));
	const row = (selected: (typeof mine)[number]) => taskRow(selected, ctx.now());
	return { mine: mine.map(row), toDecide: toDecide.map(row) };
}
