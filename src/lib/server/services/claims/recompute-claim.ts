import type { GroupContext } from '../../context';

/** Queues it again: a failed or cancelled run as it was, a finished one with a larger budget. */
export async function recomputeClaim(_ctx: GroupContext, _number: number): Promise<void> {
	throw new Error('being written');
}
