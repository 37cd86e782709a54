import type { GroupContext } from '../../context';
import { changeTask } from './step-task';

/** Says that one has begun. */
export async function startTask(ctx: GroupContext, number: number): Promise<void> {
	await changeTask(ctx, number, { kind: 'start' }, { audit: 'task.started' });
}
