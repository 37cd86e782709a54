import type { ClaimView } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claimView } from './claim-view';
import { findClaim } from './find-claim';
import { claimHistory } from './history';

/** @throws ServiceError not-found, also for a claim of another group */
export async function showClaim(ctx: GroupContext, number: number): Promise<ClaimView> {
	const { read } = ctx.db;
	const claim = await findClaim(read, ctx, number);
	const view = await claimView(read, claim, ctx.now());
	const history = await claimHistory(read, claim.id);
	return { ...view, history, own: claim.createdBy === ctx.actor.id };
}
