import { and, inArray, isNotNull, lte } from 'drizzle-orm';
import { ACTIVE_TASK_STATES, DUE_SOON_DAYS, dayOf } from '../../../ledger/tasks';
import type { Database } from '../../db/client';
import { tasks } from '../../db/schema';
import { notify } from './notify';

const DAY_MS = 86_400_000;
/** What is submitted waits for somebody else than the one who would be reminded. */
const REMINDED_STATES = ACTIVE_TASK_STATES.filter((state) => state !== 'submitted');

/**
 * Reminds of due dates: some days before whoever has the task (or opened it, when nobody has it),
 * and the day after both. Once per person and due date, however often it runs.
 * @returns how many reminders were written
 */
export async function sendDueReminders(db: Database, now: Date): Promise<number> {
	const today = dayOf(now);
	const soon = dayOf(new Date(now.getTime() + DUE_SOON_DAYS * DAY_MS));
	const wanted = and(
		inArray(tasks.state, REMINDED_STATES),
		isNotNull(tasks.dueOn),
		lte(tasks.dueOn, soon)
	);
	// Most of the time nothing is due, and then nothing waits for the queue of writes.
	const [any] = await db.read.select({ id: tasks.id }).from(tasks).where(wanted).limit(1);
	if (!any) return 0;
	return db.write(async (tx) => {
		let told = 0;
		for (const task of await tx.select().from(tasks).where(wanted)) {
			const { dueOn, assigneeId, createdBy } = task;
			if (dueOn === null) continue;
			const overdue = dueOn < today;
			const holder = assigneeId ?? createdBy;
			told += await notify(
				tx,
				{ actor: null, now: () => now },
				{
					kind: overdue ? 'task-overdue' : 'task-due-soon',
					groupId: task.groupId,
					recipients: overdue ? [holder, createdBy] : [holder],
					event: `${task.id}:${dueOn}`,
					claimId: task.claimId,
					taskId: task.id,
					text: dueOn
				}
			);
		}
		return told;
	});
}
