import type { ClaimView } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function showClaim(_ctx: GroupContext, _number: number): Promise<ClaimView> {
	throw new Error('being written');
}
