import type { ClaimInput } from '../../../schemas/claim-input';
import type { GroupContext } from '../../context';

export async function enterClaim(
	_ctx: GroupContext,
	_input: ClaimInput
): Promise<{ id: string; number: number }> {
	throw new Error('being written');
}
