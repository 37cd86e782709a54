import { and, eq, inArray, isNotNull } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { Problem } from '../../../nonlocality/problem';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { claims, recomputations } from '../../db/schema';
import { ServiceError } from '../../errors';
import { announceQueued } from '../../jobs/signal';
import { recordAudit } from '../audit';
import { groupBudget, LONGEST_BUDGET } from '../recomputations/budget';
import { queueRecomputation, requeue } from '../recomputations/queue-recomputation';
import { deriveClaim } from './derive-claim';
import { findClaim, isOwn, type ClaimRow } from './find-claim';

/**
 * Queues a claim's recomputation again: one that had a search in it with twice the time, any other
 * to be done over; in the group's time where that has been raised since. Failed stations are tried
 * again too.
 */
export async function recomputeClaim(ctx: GroupContext, number: number): Promise<void> {
	await ctx.db.write(async (tx) => {
		const claim = await findClaim(tx, ctx, number);
		if (!may(ctx.role, 'recompute', { own: isOwn(ctx, claim) })) {
			throw new ServiceError('forbidden', 'Recomputing takes the role of a member.');
		}
		if (!claim.recomputationId) {
			throw new ServiceError('conflict', 'No solver serves this quantity yet.');
		}
		const recomputationId = await again(tx, ctx, claim, claim.recomputationId);
		await retryStations(tx, ctx, claim);
		await tx.update(claims).set({ recomputationId }).where(eq(claims.id, claim.id));
		await recordAudit(tx, ctx, {
			action: 'claim.recompute-asked',
			entity: 'claim',
			entityId: claim.id,
			groupId: ctx.group.id,
			before: { recomputationId: claim.recomputationId },
			after: { recomputationId }
		});
		await deriveClaim(tx, claim.id, ctx.now());
	});
	announceQueued();
}

async function again(
	tx: Transaction,
	ctx: GroupContext,
	claim: ClaimRow,
	id: string
): Promise<string> {
	const [row] = await tx
		.select({ state: recomputations.state, problem: recomputations.problem })
		.from(recomputations)
		.where(eq(recomputations.id, id));
	if (!row) throw new ServiceError('conflict', 'Its recomputation is gone.');
	if (row.state === 'queued' || row.state === 'running') return id;
	const budget = await groupBudget(tx, ctx.group.id);
	const longer =
		row.state === 'done'
			? withMoreTime(row.problem, budget)
			: budget > row.problem.seconds
				? { ...row.problem, seconds: budget }
				: null;
	if (!longer) {
		await requeue(tx, id, ctx.group.id);
		return id;
	}
	const { inequalityId } = claim;
	return queueRecomputation(
		tx,
		{ problem: longer, inequalityId, groupId: ctx.group.id },
		ctx.now()
	);
}

/** More time finds more only where a search is cut short by it. */
function withMoreTime(problem: Problem, budget: number): Problem | null {
	const seconds = Math.min(Math.max(problem.seconds * 2, budget), LONGEST_BUDGET);
	if (problem.quantity === 'see-saw') {
		return { ...problem, seconds, starts: problem.starts * 2, seed: problem.seed + 1 };
	}
	return problem.quantity === 'quantum' && seconds > problem.seconds
		? { ...problem, seconds }
		: null;
}

async function retryStations(tx: Transaction, ctx: GroupContext, claim: ClaimRow): Promise<void> {
	if (!claim.inequalityId) return;
	const failed = await tx
		.select({ id: recomputations.id })
		.from(recomputations)
		.where(
			and(
				eq(recomputations.inequalityId, claim.inequalityId),
				isNotNull(recomputations.station),
				inArray(recomputations.state, ['failed', 'cancelled'])
			)
		);
	for (const { id } of failed) await requeue(tx, id, ctx.group.id);
}
