import { DUE_WITHIN_YEARS, dayOf, lastDueDay } from '../../../ledger/tasks';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { ServiceError } from '../../errors';
import { mayWork } from './find-task';

const wrong = (field: string, message: string) =>
	new ServiceError('invalid', message, [{ field, message }]);

/** @throws ServiceError invalid for a day that is over, and one too far ahead to be meant */
export function readDueOn(ctx: GroupContext, dueOn: string, before: string | null): string | null {
	if (dueOn === '' || dueOn === before) return dueOn || null;
	const today = dayOf(ctx.now());
	const last = lastDueDay(today);
	if (dueOn > last) {
		const message = `${dueOn} is more than ${DUE_WITHIN_YEARS} years ahead. Choose a day up to ${last}.`;
		throw wrong('dueOn', message);
	}
	if (dueOn >= today) return dueOn;
	throw wrong('dueOn', `${dueOn} is over; today is ${today} (UTC). Choose a day from today on.`);
}

/** @throws ServiceError invalid for somebody who can't work on tasks of the group */
export async function readAssignee(
	read: Reader,
	ctx: GroupContext,
	assigneeId: string,
	before: string | null
): Promise<string | null> {
	if (assigneeId === '') return null;
	if (assigneeId === before || (await mayWork(read, ctx.group.id, assigneeId))) return assigneeId;
	throw wrong('assigneeId', 'Choose somebody who is at least a member of this group.');
}
