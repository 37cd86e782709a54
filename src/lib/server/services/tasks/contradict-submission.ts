import { eq } from 'drizzle-orm';
import { PRODUCT } from '../../../ledger/task-life';
import type { Transaction } from '../../db/client';
import { submissions, tasks } from '../../db/schema';
import { stepTask, type Actor } from './step-task';
import { tell } from './tell';

/**
 * An accepted reproduction turned out to be excluded by a certificate: it is marked so and its task
 * reopened, in the transaction of the verdict that shows it.
 * @param why both numbers, in a sentence
 */
export async function contradictSubmission(
	tx: Transaction,
	ctx: Actor,
	submissionId: string,
	why: string
): Promise<void> {
	const [row] = await tx
		.update(submissions)
		.set({ state: 'contradicted', decidedAt: ctx.now(), decision: why })
		.where(eq(submissions.id, submissionId))
		.returning();
	if (!row) return;
	const [task] = await tx.select().from(tasks).where(eq(tasks.id, row.taskId));
	if (task?.state !== 'accepted') return;
	const stepped = await stepTask(tx, ctx, task, { kind: 'reopen' }, PRODUCT, {
		audit: 'task.reopened',
		columns: { reason: why },
		after: { submissionId }
	});
	// Who accepted it vouched for it, too.
	await tell(tx, ctx, 'task-returned', stepped.task, [row.submittedBy, row.decidedBy], why);
}
