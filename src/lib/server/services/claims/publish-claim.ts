import { whyNotPublishable } from '../../../ledger/publication';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { changeClaim } from './change-claim';

/** Makes a claim public; a discrepancy once a second person has compared it with the paper. */
export async function publishClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'publish-claim',
		audit: 'claim.published',
		refusal: 'Only a maintainer publishes; propose it instead.',
		change(_, claim) {
			const reason = whyNotPublishable(claim);
			if (reason) throw new ServiceError('conflict', reason);
			if (claim.visibility === 'public') return null;
			return { visibility: 'public', publishedBy: ctx.actor.id, publishedAt: ctx.now() };
		}
	});
}
