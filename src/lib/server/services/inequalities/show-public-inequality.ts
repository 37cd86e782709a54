import type { InequalityView } from '../../../schemas/views';
import type { Context } from '../../context';
import { ServiceError } from '../../errors';
import { findInequality } from './inequality-rows';
import { inequalityView } from './inequality-view';
import { isPublicClaim, isPublicInequality } from './visibility';

/** An inequality with the public claims on it. @throws ServiceError not-found without one */
export async function showPublicInequality(
	ctx: Context,
	id: string,
	normalisation?: string
): Promise<InequalityView> {
	const { read } = ctx.db;
	const row = await findInequality(read, id);
	if (!row || !(await isPublicInequality(read, id))) {
		throw new ServiceError('not-found', 'There is no such public inequality.');
	}
	const view = await inequalityView(read, row, isPublicClaim, normalisation, ctx.now());
	// How many claims a group has is its own business.
	return { ...view, claimRows: view.claimRows.map((claim) => ({ ...claim, number: 0 })) };
}
