import type { LedgerRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';

/** The rows of some claims by number, for the live update of a table. */
export async function ledgerRows(
	_ctx: GroupContext,
	_numbers: readonly number[]
): Promise<readonly LedgerRow[]> {
	throw new Error('being written');
}
