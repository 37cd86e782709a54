import { eq, sql } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { deriveVerdict } from '../../../ledger/verdict';
import { claimInput, type ClaimInput } from '../../../schemas/claim-input';
import type { GroupContext } from '../../context';
import { claimVersions, claims, groups } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { announceQueued } from '../../jobs/signal';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { deriveClaim } from './derive-claim';
import { readClaimInput } from './read-claim-input';
import { requireSound, storeClaimParts } from './store-claim';
import { tellProposed } from './tell-proposed';

/**
 * Enters a claim: paper, inequality and recomputations are stored and queued with it.
 * @throws ServiceError forbidden; invalid with an issue for each field at fault
 */
export async function enterClaim(
	ctx: GroupContext,
	input: Partial<ClaimInput>
): Promise<{ id: string; number: number }> {
	const asks = parseInput(claimInput, input);
	if (!may(ctx.role, 'enter-claim')) {
		throw new ServiceError('forbidden', 'Entering claims takes the role of a member.');
	}
	if (asks.visibility === 'public' && !may(ctx.role, 'publish-claim', { own: true })) {
		throw new ServiceError('forbidden', 'Only a maintainer publishes; propose it instead.');
	}
	const sound = requireSound(await readClaimInput(ctx, asks));
	const id = newId();
	const now = ctx.now();
	const isPublic = asks.visibility === 'public';
	const number = await ctx.db.write(async (tx) => {
		const columns = await storeClaimParts(tx, ctx, asks, sound);
		const [group] = await tx
			.update(groups)
			.set({ nextClaimNumber: sql`${groups.nextClaimNumber} + 1` })
			.where(eq(groups.id, ctx.group.id))
			.returning({ next: groups.nextClaimNumber });
		if (!group) throw new ServiceError('not-found', 'There is no such group.');
		const taken = group.next - 1;
		const recomputation = { kind: columns.recomputationId ? 'not-run' : 'no-solver' } as const;
		const verdict = deriveVerdict({
			reading: sound.stated,
			relation: sound.relation,
			evidence: [],
			recomputation,
			quantity: columns.quantityLabel
		});
		await tx.insert(claims).values({
			...columns,
			id,
			groupId: ctx.group.id,
			number: taken,
			visibility: asks.visibility,
			...(isPublic ? { publishedBy: ctx.actor.id, publishedAt: now } : {}),
			verdict: { ...verdict, diagnosis: [] },
			createdBy: ctx.actor.id,
			createdAt: now
		});
		await tx.insert(claimVersions).values({
			id: newId(),
			claimId: id,
			version: 1,
			input: asks,
			changedBy: ctx.actor.id,
			changedAt: now
		});
		await recordAudit(tx, ctx, {
			action: 'claim.entered',
			entity: 'claim',
			entityId: id,
			groupId: ctx.group.id,
			after: asks
		});
		if (asks.visibility === 'proposed') await tellProposed(tx, ctx, id);
		// The inequality may have been recomputed for another claim: the verdict is then there at once.
		await deriveClaim(tx, id, ctx.now());
		return taken;
	});
	announceQueued();
	return { id, number };
}
