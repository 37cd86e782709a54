import type { PublicClaimView } from '../../../schemas/views';
import type { Context } from '../../context';

export async function showPublicClaim(_ctx: Context, _id: string): Promise<PublicClaimView> {
	throw new Error('being written');
}
