import { and, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import { claimInput, type ClaimInput } from '../../../schemas/claim-input';
import type { GroupContext } from '../../context';
import { claimVersions, claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { announceQueued } from '../../jobs/signal';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { deriveClaim } from './derive-claim';
import { findClaim, isOwn } from './find-claim';
import { readClaimInput } from './read-claim-input';
import { requireSound, storeClaimParts } from './store-claim';
import { tellProposed } from './tell-proposed';

export const MAY_NOT_EDIT = 'Only who entered a claim and maintainers may edit it.';

/**
 * Changes a claim; every version is kept and the verdict derived anew. Who may see it is not
 * changed here, but a published claim that a member edits has to be published again.
 * @throws ServiceError conflict when `version` is no longer the current one
 */
export async function editClaim(
	ctx: GroupContext,
	number: number,
	version: number,
	input: Partial<ClaimInput>
): Promise<{ id: string; number: number; version: number }> {
	const asks = parseInput(claimInput, input);
	const before = await findClaim(ctx.db.read, ctx, number);
	if (!may(ctx.role, 'edit-claim', { own: isOwn(ctx, before) })) {
		throw new ServiceError('forbidden', MAY_NOT_EDIT);
	}
	const sound = requireSound(await readClaimInput(ctx, asks));
	const next = await ctx.db.write(async (tx) => {
		const current = await findClaim(tx, ctx, number);
		if (current.version !== version) {
			throw new ServiceError(
				'conflict',
				'Someone has changed this claim since you opened it. Your text is kept here; compare it with the claim as it is now.'
			);
		}
		const columns = await storeClaimParts(tx, ctx, asks, sound);
		const needsPublishing = current.visibility === 'public' && !may(ctx.role, 'publish-claim');
		await tx
			.update(claims)
			.set({
				...columns,
				version: version + 1,
				...(needsPublishing
					? { visibility: 'proposed' as const, publishedBy: null, publishedAt: null }
					: {})
			})
			.where(and(eq(claims.id, current.id), eq(claims.version, version)));
		await tx.insert(claimVersions).values({
			id: newId(),
			claimId: current.id,
			version: version + 1,
			input: asks,
			changedBy: ctx.actor.id,
			changedAt: ctx.now()
		});
		await recordAudit(tx, ctx, {
			action: 'claim.edited',
			entity: 'claim',
			entityId: current.id,
			groupId: ctx.group.id,
			before: withPaper(current.input, current.referenceId),
			after: withPaper(asks, columns.referenceId)
		});
		if (needsPublishing) await tellProposed(tx, ctx, current.id);
		await deriveClaim(tx, current.id, ctx.now());
		return { id: current.id, number, version: version + 1 };
	});
	announceQueued();
	return next;
}

/** The paper as the row it is: a form names it as known, or pastes it. */
function withPaper(input: ClaimInput, referenceId: string): ClaimInput {
	return { ...input, paper: 'known', referenceId, bibtex: '' };
}
