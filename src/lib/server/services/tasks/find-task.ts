import { and, desc, eq } from 'drizzle-orm';
import { hasRole } from '../../../ledger/roles';
import type { TaskFacts } from '../../../ledger/task-life';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { claims, memberships, submissions, tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import type { ClaimRow } from '../claims/find-claim';

export type TaskRecord = typeof tasks.$inferSelect;
export type SubmissionRecord = typeof submissions.$inferSelect;

/** @throws ServiceError not-found, also for a task of another group */
export async function findTask(
	read: Reader,
	ctx: Pick<GroupContext, 'group'>,
	number: number
): Promise<TaskRecord> {
	const [row] = Number.isSafeInteger(number)
		? await read
				.select()
				.from(tasks)
				.where(and(eq(tasks.groupId, ctx.group.id), eq(tasks.number, number)))
		: [];
	if (!row) throw new ServiceError('not-found', `There is no task ${number} in this group.`);
	return row;
}

/** @throws ServiceError not-found */
export async function claimOfTask(
	read: Reader,
	{ claimId }: Pick<TaskRecord, 'claimId'>
): Promise<ClaimRow> {
	const [claim] = await read.select().from(claims).where(eq(claims.id, claimId));
	if (!claim) throw new ServiceError('not-found', 'The claim of this task is gone.');
	return claim;
}

/** The try a decision is about: the newest. */
export async function latestSubmission(
	read: Reader,
	taskId: string
): Promise<SubmissionRecord | null> {
	const [row] = await read
		.select()
		.from(submissions)
		.where(eq(submissions.taskId, taskId))
		.orderBy(desc(submissions.submittedAt), desc(submissions.id))
		.limit(1);
	return row ?? null;
}

/** What decides on the task's next state. */
export async function taskFacts(
	read: Reader,
	task: TaskRecord,
	submission: Pick<SubmissionRecord, 'submittedBy'> | null
): Promise<TaskFacts> {
	const { state, assigneeId, groupId } = task;
	const handedIn = state === 'submitted' || state === 'accepted';
	const assigneeGone = assigneeId !== null && !(await mayWork(read, groupId, assigneeId));
	return {
		state,
		assigneeId,
		submittedBy: handedIn ? (submission?.submittedBy ?? null) : null,
		assigneeGone
	};
}

/** Whether a person may have tasks in this group: a member or more. */
export async function mayWork(read: Reader, groupId: string, userId: string): Promise<boolean> {
	const [row] = await read
		.select({ role: memberships.role })
		.from(memberships)
		.where(and(eq(memberships.groupId, groupId), eq(memberships.userId, userId)));
	return hasRole(row?.role, 'member');
}
