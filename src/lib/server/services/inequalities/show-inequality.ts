import type { InequalityView } from '../../../schemas/views';
import type { GroupContext } from '../../context';

export async function showInequality(
	_ctx: GroupContext,
	_id: string,
	_normalisation?: string
): Promise<InequalityView> {
	throw new Error('being written');
}
