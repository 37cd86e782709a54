import type { LedgerQuery } from '../../../schemas/ledger-query';
import type { LedgerPage } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function listClaims(_ctx: GroupContext, _query: LedgerQuery): Promise<LedgerPage> {
	throw new Error('being written');
}
