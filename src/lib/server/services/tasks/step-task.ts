import { and, eq } from 'drizzle-orm';
import {
	isRefused,
	nextTask,
	type NextTask,
	type TaskActor,
	type TaskRefusal,
	type TaskStep
} from '../../../ledger/task-life';
import { isActiveTask } from '../../../ledger/tasks';
import type { Context, GroupContext } from '../../context';
import type { Reader, Transaction } from '../../db/client';
import { tasks } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import {
	findTask,
	latestSubmission,
	taskFacts,
	type SubmissionRecord,
	type TaskRecord
} from './find-task';

/** Who and when, for the audit. */
export type Actor = Pick<Context, 'actor' | 'requestId' | 'now'>;

export interface TaskChange {
	/** For the audit: `task.taken`. */
	readonly audit: string;
	/** Columns beside state and assignee. */
	readonly columns?: Partial<Pick<TaskRecord, 'kind' | 'dueOn' | 'instructions' | 'reason'>>;
	/** The version that whoever takes the step had before them; undefined: not said. */
	readonly seen?: number | undefined;
	/** What the audit says beyond the task's own columns. */
	readonly after?: Readonly<Record<string, unknown>>;
}

export interface SteppedTask {
	readonly before: TaskRecord;
	readonly task: TaskRecord;
	/** The newest try before the step. */
	readonly submission: SubmissionRecord | null;
}

/**
 * Takes one step in a task's life, with its audit row.
 * @throws ServiceError forbidden, conflict or invalid, as the rule refuses it
 */
export async function stepTask(
	tx: Transaction,
	ctx: Actor,
	before: TaskRecord,
	step: TaskStep,
	who: TaskActor,
	{ audit, columns = {}, after = {} }: TaskChange
): Promise<SteppedTask> {
	const submission = await latestSubmission(tx, before.id);
	const next = accepted(nextTask(await taskFacts(tx, before, submission), step, who));
	const now = ctx.now();
	const closed = isActiveTask(next.state) ? null : now;
	const [task] = await tx
		.update(tasks)
		.set({ ...columns, ...next, version: before.version + 1, updatedAt: now, closedAt: closed })
		.where(and(eq(tasks.id, before.id), eq(tasks.version, before.version)))
		.returning();
	if (!task) throw new ServiceError('conflict', 'Somebody has just changed this task.');
	await recordAudit(tx, ctx, {
		action: audit,
		entity: 'task',
		entityId: task.id,
		groupId: task.groupId,
		claimId: task.claimId,
		before: auditOf(before),
		after: { ...auditOf(task), ...after }
	});
	return { before, task, submission };
}

/** Nothing, when the step can be taken now. @throws ServiceError as `stepTask` does */
export async function refuseStep(
	read: Reader,
	task: TaskRecord,
	step: TaskStep,
	who: TaskActor
): Promise<void> {
	accepted(nextTask(await taskFacts(read, task, await latestSubmission(read, task.id)), step, who));
}

function accepted(next: NextTask | TaskRefusal): NextTask {
	if (!isRefused(next)) return next;
	const { refused, message } = next;
	throw new ServiceError(
		refused,
		message,
		refused === 'invalid' ? [{ field: 'reason', message }] : []
	);
}

/** A task as the audit keeps it. */
export function auditOf(task: TaskRecord) {
	const { number, kind, state, assigneeId, dueOn, instructions, reason } = task;
	return { number, kind, state, assigneeId, dueOn, instructions, reason };
}

/** A step by the one who asks, in a transaction of its own, and what belongs to it. */
export async function changeTask(
	ctx: GroupContext,
	number: number,
	step: TaskStep,
	change: TaskChange,
	also: (tx: Transaction, stepped: SteppedTask) => Promise<void> = () => Promise.resolve()
): Promise<void> {
	await ctx.db.write(async (tx) => {
		const task = await findTask(tx, ctx, number);
		if (change.seen !== undefined && change.seen !== task.version) {
			throw new ServiceError(
				'conflict',
				'Somebody has changed this task since you opened it. Look at it again, as it is now.'
			);
		}
		await also(tx, await stepTask(tx, ctx, task, step, asActor(ctx), change));
	});
}

export const asActor = (ctx: GroupContext): TaskActor => ({ id: ctx.actor.id, role: ctx.role });
