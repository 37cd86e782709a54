import type { InequalityView } from '../../../schemas/views';
import type { Context } from '../../context';

export async function showPublicInequality(
	_ctx: Context,
	_id: string,
	_normalisation?: string
): Promise<InequalityView> {
	throw new Error('being written');
}
