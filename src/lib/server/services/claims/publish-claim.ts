import type { GroupContext } from '../../context';

export async function publishClaim(_ctx: GroupContext, _number: number): Promise<void> {
	throw new Error('being written');
}
