import { eq } from 'drizzle-orm';
import type { InequalityView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { findInequality } from './inequality-rows';
import { inequalityView } from './inequality-view';
import { isVisibleToGroup } from './visibility';

/** An inequality with the group's claims on it. @throws ServiceError not-found */
export async function showInequality(
	ctx: GroupContext,
	id: string,
	normalisation?: string
): Promise<InequalityView> {
	const { read } = ctx.db;
	const row = await findInequality(read, id);
	if (!row || !(await isVisibleToGroup(read, id, ctx.group.id))) {
		throw new ServiceError('not-found', 'There is no such inequality.');
	}
	const own = eq(claims.groupId, ctx.group.id);
	return inequalityView(read, row, own, normalisation, ctx.now(), [ctx.group.id]);
}
