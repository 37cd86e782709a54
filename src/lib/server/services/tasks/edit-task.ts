import { may } from '../../../ledger/policy';
import type { TaskStep } from '../../../ledger/task-life';
import { isActiveTask } from '../../../ledger/tasks';
import { editTaskInput, type EditTaskInput } from '../../../schemas/task-input';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { parseInput } from '../parse-input';
import { findTask, type TaskRecord } from './find-task';
import { TAKEN_BACK } from './release-task';
import { requireSecondPerson } from './second-person';
import { asActor, stepTask } from './step-task';
import { readAssignee, readDueOn } from './task-fields';
import { tell } from './tell';

/**
 * Changes what a task asks, whose it is and until when.
 * @throws ServiceError conflict when `version` is no longer the current one
 */
export async function editTask(
	ctx: GroupContext,
	number: number,
	input: Partial<EditTaskInput>
): Promise<void> {
	if (!may(ctx.role, 'edit-task')) {
		throw new ServiceError('forbidden', 'Changing tasks takes the role of a maintainer.');
	}
	const asks = parseInput(editTaskInput, input);
	await ctx.db.write(async (tx) => {
		const before = await findTask(tx, ctx, number);
		requireCurrent(before, asks);
		const { kind, instructions } = asks;
		const dueOn = readDueOn(ctx, asks.dueOn, before.dueOn);
		const to = await readAssignee(tx, ctx, asks.assigneeId, before.assigneeId);
		const same = kind === before.kind && dueOn === before.dueOn;
		const sameHands = to === before.assigneeId;
		if (same && sameHands && instructions === before.instructions) return;
		const change = { audit: 'task.edited', columns: { kind, dueOn, instructions } };
		await requireSecondPerson(tx, { ...before, kind, assigneeId: to });
		const step: TaskStep = { kind: 'assign', to };
		const { task } = await stepTask(tx, ctx, before, step, asActor(ctx), change);
		if (sameHands) return;
		await tell(tx, ctx, 'task-assigned', task, [to]);
		const gone = to === null ? TAKEN_BACK : 'It is somebody else’s now.';
		await tell(tx, ctx, 'task-cancelled', task, [before.assigneeId], gone);
	});
}

function requireCurrent(task: TaskRecord, { version, kind }: EditTaskInput): void {
	if (task.version !== version) {
		throw new ServiceError(
			'conflict',
			'Someone has changed this task since you opened it. Your text is kept here; compare it with the task as it is now.'
		);
	}
	if (!isActiveTask(task.state)) {
		throw new ServiceError('conflict', `The task is ${task.state}: open another one instead.`);
	}
	if (task.state === 'submitted' && kind !== task.kind) {
		const message = 'What is asked can’t change while an answer to it waits to be accepted.';
		throw new ServiceError('conflict', message, [{ field: 'kind', message }]);
	}
}
