import { eq } from 'drizzle-orm';
import type { Problem } from '../../../nonlocality/problem';
import type { Context } from '../../context';
import { recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { runShortTask } from '../../jobs/current-pool';
import { requireVisible } from './find-visible';

/** The semidefinite programme in the SDPA sparse format. @throws ServiceError not-found */
export async function sdpaText(ctx: Context, id: string): Promise<string> {
	await requireVisible(ctx, id);
	const [row] = await ctx.db.read
		.select({ problem: recomputations.problem })
		.from(recomputations)
		.where(eq(recomputations.id, id));
	if (row?.problem.quantity !== 'npa') {
		throw new ServiceError('not-found', 'This recomputation is no semidefinite programme.');
	}
	return printProgramme(row.problem);
}

/** @throws ServiceError invalid with the figure for a relaxation past the limits */
export async function printProgramme(problem: Problem): Promise<string> {
	const printed = await runShortTask((pool) => pool.sdpa(problem));
	if ('text' in printed) return printed.text;
	const message = `There is no such programme: ${printed.refused}.`;
	throw new ServiceError('invalid', message, [{ field: 'level', message }]);
}
