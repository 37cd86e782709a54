import { and, eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { submissions } from '../../db/schema';
import { readReason } from './read-reason';
import { changeTask, type Actor, type SteppedTask } from './step-task';
import { tell } from './tell';

/** Ends a task with a reason; what was submitted for it waits no longer. */
export async function cancelTask(ctx: GroupContext, number: number, reason: string): Promise<void> {
	const why = readReason(reason);
	await changeTask(
		ctx,
		number,
		{ kind: 'cancel', reason: why },
		{ audit: 'task.cancelled', columns: { reason: why } },
		(tx, stepped) => endTask(tx, ctx, stepped, why)
	);
}

/** What belongs to cancelling, whoever does it. */
export async function endTask(
	tx: Transaction,
	ctx: Actor,
	{ before, task }: SteppedTask,
	reason: string
): Promise<void> {
	await tx
		.update(submissions)
		.set({
			state: 'returned',
			decidedBy: ctx.actor?.id ?? null,
			decidedAt: ctx.now(),
			decision: `The task was cancelled: ${reason}`
		})
		.where(and(eq(submissions.taskId, task.id), eq(submissions.state, 'waiting')));
	await tell(tx, ctx, 'task-cancelled', task, [before.assigneeId], reason);
}
