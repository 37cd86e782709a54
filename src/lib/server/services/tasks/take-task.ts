import type { GroupContext } from '../../context';
import { requireSecondPerson } from './second-person';
import { changeTask } from './step-task';

/** An open task becomes the actor's; of many who take it at once one gets it. */
export async function takeTask(ctx: GroupContext, number: number): Promise<void> {
	await changeTask(ctx, number, { kind: 'take' }, { audit: 'task.taken' }, (tx, { task }) =>
		requireSecondPerson(tx, task)
	);
}
