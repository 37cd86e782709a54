import { eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { mayStep, type TaskFacts, type TaskStep } from '../../../ledger/task-life';
import { SUBMISSION_KINDS_OF } from '../../../ledger/task-submissions';
import { isActiveTask } from '../../../ledger/tasks';
import type { TaskView } from '../../../schemas/task-views';
import type { GroupContext } from '../../context';
import { tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import { mayConfirm } from '../transcriptions/may-confirm';
import { findTask, latestSubmission, taskFacts } from './find-task';
import { asActor } from './step-task';
import { submissionViews } from './submission-views';
import { claimTask, selectTaskRows } from './task-rows';

/** A task's page. @throws ServiceError not-found, also for a task of another group */
export async function showTask(ctx: GroupContext, number: number): Promise<TaskView> {
	const { read } = ctx.db;
	const { id } = await findTask(read, ctx, number);
	const [selected] = await selectTaskRows(read, eq(tasks.id, id));
	if (!selected) throw new ServiceError('not-found', `There is no task ${number} in this group.`);
	const { task, claim } = selected;
	const facts = await taskFacts(read, task, await latestSubmission(read, id));
	const compares = await mayConfirm(read, ctx, claim);
	// A comparison with the paper is not for who wrote the claim.
	const answers = task.kind !== 'confirm-transcription' || compares;
	const steps = allowed(ctx, facts);
	return {
		...claimTask(selected, ctx.now()),
		submissions: await submissionViews(read, task, claim),
		own: task.assigneeId === ctx.actor.id,
		may: { ...steps, take: steps.take && answers, submit: steps.submit && answers },
		ownSubmission: facts.state === 'submitted' && facts.submittedBy === ctx.actor.id,
		submissionKinds: SUBMISSION_KINDS_OF[task.kind],
		mayConfirm: compares
	};
}

/** Asked of the same rule that the steps themselves obey. */
function allowed(ctx: GroupContext, facts: TaskFacts): TaskView['may'] {
	const can = (step: TaskStep) => mayStep(facts, step, asActor(ctx));
	return {
		take: can({ kind: 'take' }),
		start: can({ kind: 'start' }),
		submit: can({ kind: 'submit' }),
		release: can({ kind: 'release' }),
		decide: can({ kind: 'accept' }),
		edit: isActiveTask(facts.state) && may(ctx.role, 'edit-task'),
		cancel: can({ kind: 'cancel', reason: 'any' })
	};
}
