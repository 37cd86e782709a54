import { eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import { submissions, tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import { deriveClaim } from '../claims/derive-claim';
import type { ClaimRow } from '../claims/find-claim';
import { quantityKey } from '../claims/quantity-key';
import { claimOfTask, type SubmissionRecord } from './find-task';
import { readReason } from './read-reason';
import { changeTask } from './step-task';
import { tell } from './tell';
import { tellAgreement } from './tell-agreement';

/**
 * Accepts what was submitted; a value found enters the claim's verdict at once. When a certificate
 * excludes it, it is marked as contradicted and its task reopened in the same transaction.
 * @param seen the task's version on the page it was decided on: what came later is not accepted unread
 * @param comment what convinced whoever accepts; may be empty
 * @returns whether the task is reopened
 */
export async function acceptSubmission(
	ctx: GroupContext,
	number: number,
	seen?: number,
	comment = ''
): Promise<{ contradicted: boolean }> {
	const said = readReason(comment);
	let contradicted = false;
	await changeTask(
		ctx,
		number,
		{ kind: 'accept' },
		{ audit: 'task.accepted', columns: { reason: '' }, seen, after: said ? { comment: said } : {} },
		async (tx, { task, submission }) => {
			if (!submission) throw new ServiceError('conflict', 'There is nothing to accept.');
			const before = await claimOfTask(tx, task);
			requireCurrent(submission, before);
			await tx
				.update(submissions)
				.set({ state: 'accepted', decidedBy: ctx.actor.id, decidedAt: ctx.now(), decision: said })
				.where(eq(submissions.id, submission.id));
			await deriveClaim(tx, task.claimId, ctx.now());
			const [after] = await tx
				.select({ state: tasks.state })
				.from(tasks)
				.where(eq(tasks.id, task.id));
			contradicted = after?.state !== 'accepted';
			if (contradicted) return;
			await tell(tx, ctx, 'task-accepted', task, [submission.submittedBy], said);
			await tellAgreement(tx, ctx, 'task-accepted', task, before, submission.submittedBy);
		}
	);
	return { contradicted };
}

/** A value that was found for something else would be accepted and count for nothing. */
function requireCurrent(submission: SubmissionRecord, claim: ClaimRow): void {
	if (submission.kind !== 'value') return;
	if (quantityKey(claim) === submission.quantityKey) return;
	throw new ServiceError(
		'conflict',
		'The claim was edited since and is about something else than this value: return it, so that the value is found again.'
	);
}
