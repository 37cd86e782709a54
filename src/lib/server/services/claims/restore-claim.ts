import type { GroupContext } from '../../context';

export async function restoreClaim(_ctx: GroupContext, _number: number): Promise<void> {
	throw new Error('being written');
}
