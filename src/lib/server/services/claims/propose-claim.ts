import type { GroupContext } from '../../context';

export async function proposeClaim(_ctx: GroupContext, _number: number): Promise<void> {
	throw new Error('being written');
}
