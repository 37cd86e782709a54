import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { dayWords } from '../../../ledger/day-words';
import { notify } from '../notifications/notify';
import type { TaskRecord } from './find-task';
import { tell } from './tell';

export interface OpenedTask {
	readonly task: TaskRecord;
	readonly claimNumber: number;
}

/** Tells whoever tasks are opened for: of several that were given in one go once, with their list. */
export async function tellAssigned(
	tx: Transaction,
	ctx: Pick<Context, 'actor' | 'now'>,
	opened: readonly OpenedTask[]
): Promise<void> {
	const [first, ...more] = opened;
	if (!first) return;
	const { task } = first;
	if (more.length === 0) return tell(tx, ctx, 'task-assigned', task, [task.assigneeId]);
	if (task.assigneeId === null) return;
	await notify(tx, ctx, {
		kind: 'task-assigned',
		groupId: task.groupId,
		recipients: [task.assigneeId],
		event: `${task.id}:${task.version}`,
		text: opened.map(line).join('\n')
	});
}

function line({ task, claimNumber }: OpenedTask): string {
	const due = task.dueOn === null ? '' : `, due ${dayWords(task.dueOn)}`;
	return `Task ${task.number} on claim ${claimNumber}${due}`;
}
