import type { ClaimInput } from '../../../schemas/claim-input';
import type { GroupContext } from '../../context';

/** @throws ServiceError conflict when `version` is no longer the current one. */
export async function editClaim(
	_ctx: GroupContext,
	_number: number,
	_version: number,
	_input: ClaimInput
): Promise<{ id: string; number: number; version: number }> {
	throw new Error('being written');
}
