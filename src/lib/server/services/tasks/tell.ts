import type { NotificationKind } from '../../../ledger/notifications';
import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { notify } from '../notifications/notify';
import type { TaskRecord } from './find-task';

/** Tells people what became of a task; each of its versions is told once. */
export async function tell(
	tx: Transaction,
	ctx: Pick<Context, 'actor' | 'now'>,
	kind: NotificationKind,
	task: TaskRecord,
	recipients: readonly (string | null)[],
	text = ''
): Promise<void> {
	await notify(tx, ctx, {
		kind,
		groupId: task.groupId,
		recipients: recipients.filter((id) => id !== null),
		event: `${task.id}:${task.version}`,
		claimId: task.claimId,
		taskId: task.id,
		text
	});
}
