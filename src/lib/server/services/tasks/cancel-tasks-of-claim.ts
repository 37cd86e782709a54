import { and, asc, eq } from 'drizzle-orm';
import { PRODUCT } from '../../../ledger/task-life';
import type { Transaction } from '../../db/client';
import { tasks } from '../../db/schema';
import { endTask } from './cancel-task';
import { stepTask, type Actor } from './step-task';
import { activeTask } from './task-conditions';

/** Ends what is still to be done about a claim, in the transaction that ends the claim. */
export async function cancelTasksOfClaim(
	tx: Transaction,
	ctx: Actor,
	claimId: string,
	reason: string
): Promise<void> {
	const active = await tx
		.select()
		.from(tasks)
		.where(and(eq(tasks.claimId, claimId), activeTask))
		.orderBy(asc(tasks.number));
	for (const task of active) {
		const change = { audit: 'task.cancelled', columns: { reason } };
		const stepped = await stepTask(tx, ctx, task, { kind: 'cancel', reason }, PRODUCT, change);
		await endTask(tx, ctx, stepped, reason);
	}
}
