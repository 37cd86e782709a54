import type { GroupContext } from '../../context';
import { changeTask } from './step-task';
import { tell } from './tell';

/** Gives a task back, one's own or as a maintainer somebody else's: it is open to all again. */
export async function releaseTask(ctx: GroupContext, number: number): Promise<void> {
	await changeTask(
		ctx,
		number,
		{ kind: 'release' },
		{ audit: 'task.released' },
		async (tx, { before, task }) => {
			await tell(tx, ctx, 'task-cancelled', task, [before.assigneeId], TAKEN_BACK);
		}
	);
}

export const TAKEN_BACK = 'It was taken back and is open to all again.';
