import { and, eq, or } from 'drizzle-orm';
import type { Context } from '../../context';
import { claims, memberships, recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { isPublicClaim } from '../inequalities/visibility';
import { isSharedRun } from './shared-run';

/**
 * Makes sure that the viewer may see a recomputation: one that a public claim asked for or that is
 * belongs to an inequality with a public claim; for members also those of their groups' claims.
 * @throws ServiceError not-found otherwise, as if it did not exist
 */
export async function requireVisible(ctx: Context, id: string): Promise<void> {
	const { read } = ctx.db;
	const related = or(
		eq(claims.recomputationId, recomputations.id),
		and(isSharedRun, eq(claims.inequalityId, recomputations.inequalityId))
	);
	const open = await read
		.select({ id: recomputations.id })
		.from(recomputations)
		.innerJoin(claims, related)
		.where(and(eq(recomputations.id, id), isPublicClaim))
		.limit(1);
	if (open.length > 0) return;
	if (ctx.actor) {
		const own = await read
			.select({ id: recomputations.id })
			.from(recomputations)
			.innerJoin(claims, related)
			.innerJoin(
				memberships,
				and(eq(memberships.groupId, claims.groupId), eq(memberships.userId, ctx.actor.id))
			)
			.where(eq(recomputations.id, id))
			.limit(1);
		if (own.length > 0) return;
	}
	throw new ServiceError('not-found', 'There is no such recomputation.');
}
