import { eq } from 'drizzle-orm';
import type { RecomputationView } from '../../../schemas/views';
import type { Context } from '../../context';
import { recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { IDENTITY_TEXT, readMap } from '../inequalities/affine';
import { requireVisible } from './find-visible';
import { recomputationViews } from './recomputation-view';

/** A run in the normalisation of its own problem. @throws ServiceError not-found */
export async function showRecomputation(ctx: Context, id: string): Promise<RecomputationView> {
	await requireVisible(ctx, id);
	const [view] = await recomputationViews(
		ctx.db.read,
		eq(recomputations.id, id),
		readMap(IDENTITY_TEXT),
		ctx.now()
	);
	if (!view) throw new ServiceError('not-found', 'There is no such recomputation.');
	return view;
}
