import type { GroupContext } from '../../context';

export async function unpublishClaim(_ctx: GroupContext, _number: number): Promise<void> {
	throw new Error('being written');
}
