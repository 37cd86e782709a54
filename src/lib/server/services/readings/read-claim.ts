import type { ClaimInput } from '../../../schemas/claim-input';
import type { ReadingView } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function readClaim(
	_ctx: GroupContext,
	_partial: Partial<ClaimInput>
): Promise<ReadingView> {
	throw new Error('being written');
}
