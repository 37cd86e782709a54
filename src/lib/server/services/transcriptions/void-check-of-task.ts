import { and, eq, isNull } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { claims, transcriptionChecks } from '../../db/schema';
import { recordAudit } from '../audit';
import type { TaskRecord } from '../tasks/find-task';
import { settleConfirmation } from './settle-confirmation';

/** The comparison handed in for a task counts no more: the task was returned. */
export async function voidCheckOfTask(
	tx: Transaction,
	ctx: GroupContext,
	{ id: taskId, claimId }: Pick<TaskRecord, 'id' | 'claimId'>
): Promise<void> {
	const now = ctx.now();
	const voided = await tx
		.update(transcriptionChecks)
		.set({ voidedAt: now })
		.where(
			and(
				eq(transcriptionChecks.claimId, claimId),
				eq(transcriptionChecks.taskId, taskId),
				isNull(transcriptionChecks.voidedAt)
			)
		)
		.returning({ id: transcriptionChecks.id });
	if (voided.length === 0) return;
	const [claim] = await tx.select().from(claims).where(eq(claims.id, claimId));
	if (!claim) return;
	const after = await settleConfirmation(tx, claim, now);
	const { confirmedBy, confirmedVersion } = claim;
	await recordAudit(tx, ctx, {
		action: 'claim.transcription-voided',
		entity: 'claim',
		entityId: claim.id,
		groupId: ctx.group.id,
		before: { confirmedBy, confirmedVersion },
		after: { ...after, taskId }
	});
}
