import type { InequalityRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';

/** Known inequalities whose name, scenario or formula holds the text; empty: the usual ones. */
export async function searchInequalities(
	_ctx: GroupContext,
	_text: string
): Promise<readonly InequalityRow[]> {
	throw new Error('being written');
}
