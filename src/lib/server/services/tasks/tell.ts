import { and, eq, inArray } from 'drizzle-orm';
import type { NotificationKind } from '../../../ledger/notifications';
import type { Context } from '../../context';
import type { Transaction } from '../../db/client';
import { memberships } from '../../db/schema';
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

/** Those who accept or return what is submitted. */
export async function deciders(tx: Transaction, groupId: string): Promise<string[]> {
	const rows = await tx
		.select({ userId: memberships.userId })
		.from(memberships)
		.where(
			and(eq(memberships.groupId, groupId), inArray(memberships.role, ['maintainer', 'owner']))
		);
	return rows.map(({ userId }) => userId);
}
