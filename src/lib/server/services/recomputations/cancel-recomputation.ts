import type { GroupContext } from '../../context';

export async function cancelRecomputation(_ctx: GroupContext, _id: string): Promise<void> {
	throw new Error('being written');
}
