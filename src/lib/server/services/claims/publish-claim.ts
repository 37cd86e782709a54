import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { changeClaim } from './change-claim';
import { isOwn } from './find-claim';

/** Makes a claim public. A discrepancy needs a second person, who has compared it with the paper. */
export async function publishClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'publish-claim',
		audit: 'claim.published',
		refusal: 'Only a maintainer publishes; propose it instead.',
		change(_, claim) {
			if (claim.state === 'withdrawn') {
				throw new ServiceError('conflict', 'This claim is withdrawn.');
			}
			if (claim.visibility === 'public') return null;
			if (claim.status === 'discrepancy' && isOwn(ctx, claim)) {
				throw new ServiceError(
					'forbidden',
					'You entered this claim: a discrepancy is published by a second person, who has compared value, locator and inequality with the paper.'
				);
			}
			return { visibility: 'public', publishedBy: ctx.actor.id, publishedAt: ctx.now() };
		}
	});
}
