import { and, eq, inArray, ne, or } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { claims, recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { stopRun } from '../../jobs/signal';
import { recordAudit } from '../audit';
import { deriveTouchedClaims } from '../claims/derive-claim';

/**
 * Takes a run out of the queue or stops it. One that another group's claims rest on too is not one
 * group's to stop.
 */
export async function cancelRecomputation(ctx: GroupContext, id: string): Promise<void> {
	await ctx.db.write(async (tx) => {
		const [run] = await tx
			.select({
				inequalityId: recomputations.inequalityId,
				station: recomputations.station,
				state: recomputations.state
			})
			.from(recomputations)
			.where(eq(recomputations.id, id));
		const own = eq(claims.recomputationId, id);
		const uses =
			run?.station && run.inequalityId ? or(own, eq(claims.inequalityId, run.inequalityId)) : own;
		const users = run
			? await tx
					.select({ id: claims.id, groupId: claims.groupId, createdBy: claims.createdBy })
					.from(claims)
					.where(and(uses, ne(claims.state, 'withdrawn')))
			: [];
		const mine = users.filter(({ groupId }) => groupId === ctx.group.id);
		if (mine.length === 0) throw new ServiceError('not-found', 'There is no such recomputation.');
		const isOwn = mine.every(({ createdBy }) => createdBy === ctx.actor.id);
		if (!may(ctx.role, 'cancel-recomputation', { own: isOwn })) {
			throw new ServiceError(
				'forbidden',
				'Only who entered the claim and maintainers may stop it.'
			);
		}
		if (users.length > mine.length) {
			throw new ServiceError('conflict', 'Another group waits for this recomputation too.');
		}
		const stopped = await tx
			.update(recomputations)
			.set({
				state: 'cancelled',
				leaseToken: null,
				leaseUntil: null,
				progress: null,
				finishedAt: ctx.now(),
				reason: 'stopped by a member of a group'
			})
			.where(and(eq(recomputations.id, id), inArray(recomputations.state, ['queued', 'running'])))
			.returning({ id: recomputations.id });
		if (stopped.length === 0) {
			throw new ServiceError('conflict', 'This recomputation is not running any more.');
		}
		await recordAudit(tx, ctx, {
			action: 'recomputation.cancelled',
			entity: 'recomputation',
			entityId: id,
			groupId: ctx.group.id,
			// A run may serve several claims; its row stands with the first of the group's.
			claimId: mine[0]?.id,
			before: { state: run?.state },
			after: { state: 'cancelled' }
		});
		await deriveTouchedClaims(tx, id, ctx.now());
	});
	stopRun(id);
}
