import { eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import { submissions } from '../../db/schema';
import { ServiceError } from '../../errors';
import { deriveClaim } from '../claims/derive-claim';
import { voidCheckOfTask } from '../transcriptions/void-check-of-task';
import { readReason } from './read-reason';
import { changeTask } from './step-task';
import { tell } from './tell';

/**
 * Sends a submission back with a reason; its task is the submitter's again.
 * @param seen the task's version on the page it was decided on: what came later is not returned unread
 */
export async function returnSubmission(
	ctx: GroupContext,
	number: number,
	reason: string,
	seen?: number
): Promise<void> {
	const why = readReason(reason);
	await changeTask(
		ctx,
		number,
		{ kind: 'return', reason: why },
		{ audit: 'task.returned', columns: { reason: why }, seen },
		async (tx, { task, submission }) => {
			if (!submission) throw new ServiceError('conflict', 'There is nothing to return.');
			await tx
				.update(submissions)
				.set({ state: 'returned', decidedBy: ctx.actor.id, decidedAt: ctx.now(), decision: why })
				.where(eq(submissions.id, submission.id));
			if (submission.kind === 'transcription') await voidCheckOfTask(tx, ctx, task);
			await deriveClaim(tx, task.claimId, ctx.now());
			await tell(tx, ctx, 'task-returned', task, [submission.submittedBy], why);
		}
	);
}
