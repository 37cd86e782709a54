import { eq } from 'drizzle-orm';
import type { Result } from '../../../nonlocality/problem';
import type { Context } from '../../context';
import { results } from '../../db/schema';
import { ServiceError } from '../../errors';
import { requireVisible } from './find-visible';

/**
 * The result with its certificate and problem: it stands alone and can be checked elsewhere.
 * @throws ServiceError not-found, also while there is no result
 */
export async function downloadResult(ctx: Context, id: string): Promise<Result> {
	await requireVisible(ctx, id);
	const [row] = await ctx.db.read
		.select({ result: results.result })
		.from(results)
		.where(eq(results.recomputationId, id));
	if (!row) throw new ServiceError('not-found', 'This recomputation has no result yet.');
	return row.result;
}
