import type { ClaimView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claimView } from './claim-view';
import { findClaim } from './find-claim';

/** @throws ServiceError not-found, also for a claim of another group */
export async function showClaim(ctx: GroupContext, number: number): Promise<ClaimView> {
	const claim = await findClaim(ctx.db.read, ctx, number);
	const view = await claimView(ctx.db.read, claim, ctx.now());
	return { ...view, own: claim.createdBy === ctx.actor.id };
}
