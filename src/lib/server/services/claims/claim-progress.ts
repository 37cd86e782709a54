import type { ClaimProgressView } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function claimProgress(
	_ctx: GroupContext,
	_number: number
): Promise<ClaimProgressView> {
	throw new Error('being written');
}
