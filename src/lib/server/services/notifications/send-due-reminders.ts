import { and, eq, inArray, isNotNull, isNull, lte, max, or, sql } from 'drizzle-orm';
import { DUE_SOON_DAYS, dayOf } from '../../../ledger/tasks';
import type { Database, Transaction } from '../../db/client';
import { audit, notifications, tasks } from '../../db/schema';
import { taskToDo } from '../tasks/task-conditions';
import { notify } from './notify';

const DAY_MS = 86_400_000;

type Task = typeof tasks.$inferSelect;

/**
 * Reminds of due dates: some days before whoever has the task (or opened it, when nobody has it),
 * and the day after both. Once for each due date, however often it runs.
 * @returns how many reminders were written
 */
export async function sendDueReminders(db: Database, now: Date): Promise<number> {
	const today = dayOf(now);
	const soon = dayOf(new Date(now.getTime() + DUE_SOON_DAYS * DAY_MS));
	const wanted = and(taskToDo, isNotNull(tasks.dueOn), lte(tasks.dueOn, soon));
	// Most of the time nothing is due, and then nothing waits for the queue of writes.
	const [any] = await db.read.select({ id: tasks.id }).from(tasks).where(wanted).limit(1);
	if (!any) return 0;
	return db.write(async (tx) => {
		const due = await tx.select().from(tasks).where(wanted);
		const said = await whenSaid(tx, due);
		const overdue = await toldOverdue(tx, due);
		let told = 0;
		for (const task of due) {
			if (task.dueOn === null) continue;
			if (task.dueOn < today) {
				const known = overdue.has(eventOf(task));
				if (!known) told += await remind(tx, task, 'task-overdue', now);
			} else if (isNews(task.dueOn, said.get(task.id) ?? task.createdAt)) {
				told += await remind(tx, task, 'task-due-soon', now);
			}
		}
		return told;
	});
}

/** Whoever was told of a date less than a day before the reminder of it would go has heard it. */
function isNews(dueOn: string, saidAt: Date): boolean {
	const reminderAt = Date.parse(dueOn) - DUE_SOON_DAYS * DAY_MS;
	return saidAt.getTime() <= reminderAt - DAY_MS;
}

const eventOf = ({ id, dueOn }: Task) => `${id}:${dueOn ?? ''}`;

function remind(
	tx: Transaction,
	task: Task,
	kind: 'task-due-soon' | 'task-overdue',
	now: Date
): Promise<number> {
	const holder = task.assigneeId ?? task.createdBy;
	return notify(
		tx,
		{ actor: null, now: () => now },
		{
			kind,
			groupId: task.groupId,
			recipients: kind === 'task-overdue' ? [holder, task.createdBy] : [holder],
			event: eventOf(task),
			claimId: task.claimId,
			taskId: task.id,
			text: task.dueOn ?? ''
		}
	);
}

/** Per task when its present date was set, or given with the task to whoever has it now. */
async function whenSaid(tx: Transaction, due: readonly Task[]): Promise<Map<string, Date>> {
	const dueOn = (column: typeof audit.before | typeof audit.after) =>
		sql`json_extract(${column}, '$.dueOn')`;
	const assignee = (column: typeof audit.before | typeof audit.after) =>
		sql`json_extract(${column}, '$.assigneeId')`;
	const dateSet = sql`${dueOn(audit.before)} is not ${tasks.dueOn}`;
	const handed = sql`${assignee(audit.after)} = ${tasks.assigneeId}
		and ${assignee(audit.before)} is not ${tasks.assigneeId}`;
	const rows = await tx
		.select({ id: tasks.id, at: max(audit.at) })
		.from(audit)
		.innerJoin(tasks, eq(tasks.id, audit.entityId))
		.where(
			and(
				eq(audit.entity, 'task'),
				inArray(
					audit.entityId,
					due.map(({ id }) => id)
				),
				sql`${dueOn(audit.after)} = ${tasks.dueOn}`,
				or(isNull(audit.before), dateSet, handed)
			)
		)
		.groupBy(tasks.id);
	return new Map(rows.flatMap(({ id, at }) => (at ? [[id, at]] : [])));
}

/** Due dates whose end somebody was told of; who gets the task later reads the date with it. */
async function toldOverdue(tx: Transaction, due: readonly Task[]): Promise<ReadonlySet<string>> {
	const rows = await tx
		.selectDistinct({ taskId: notifications.taskId, dueOn: notifications.text })
		.from(notifications)
		.where(
			and(
				eq(notifications.kind, 'task-overdue'),
				inArray(
					notifications.taskId,
					due.map(({ id }) => id)
				)
			)
		);
	return new Set(rows.map(({ taskId, dueOn }) => `${taskId ?? ''}:${dueOn}`));
}
