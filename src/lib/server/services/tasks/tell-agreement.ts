import { eq } from 'drizzle-orm';
import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { claims } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';
import { notify } from '../notifications/notify';
import type { TaskRecord } from './find-task';

/**
 * What somebody found made an open claim agree: who entered it reads so in the list of news. A
 * discrepancy, and its end, are told and mailed with the verdict itself; this calls for nothing.
 * @param before the claim before the verdict was derived anew
 */
export async function tellAgreement(
	tx: Transaction,
	ctx: Pick<Context, 'actor' | 'now'>,
	kind: 'task-submitted' | 'task-accepted',
	task: TaskRecord,
	before: ClaimRow,
	submittedBy: string
): Promise<void> {
	const [claim] = await tx.select().from(claims).where(eq(claims.id, before.id));
	if (before.status !== 'open' || claim?.status !== 'agreement') return;
	if (claim.state !== 'active' || claim.createdBy === submittedBy) return;
	await notify(tx, ctx, {
		kind,
		groupId: task.groupId,
		recipients: [claim.createdBy],
		event: `${task.id}:${task.version}`,
		claimId: task.claimId,
		taskId: task.id,
		text: `Claim ${claim.number} agrees now, with what was found.`,
		listOnly: true
	});
}
