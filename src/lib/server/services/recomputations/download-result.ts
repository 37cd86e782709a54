import { eq } from 'drizzle-orm';
import type { Result } from '../../../nonlocality/problem';
import type { Context } from '../../context';
import { recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { requireVisible } from './find-visible';

/**
 * The result with its certificate and problem: it stands alone and can be checked elsewhere.
 * @throws ServiceError not-found, also while there is no result
 */
export async function downloadResult(ctx: Context, id: string): Promise<Result> {
	await requireVisible(ctx, id);
	const [row] = await ctx.db.read
		.select({ result: recomputations.result })
		.from(recomputations)
		.where(eq(recomputations.id, id));
	if (!row?.result) throw new ServiceError('not-found', 'This recomputation has no result yet.');
	return row.result;
}
