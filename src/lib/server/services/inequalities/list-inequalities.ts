import type { InequalityRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';

/** Those the group has claims on. */
export async function listInequalities(_ctx: GroupContext): Promise<readonly InequalityRow[]> {
	throw new Error('being written');
}
