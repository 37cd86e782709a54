import type { GroupContext } from '../../context';
import { changeClaim } from './change-claim';

/** Takes a claim back from the public, or declines a proposal. */
export async function unpublishClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'unpublish-claim',
		audit: 'claim.unpublished',
		refusal: 'Only a maintainer takes a claim back from the public.',
		change: (_, { visibility }) =>
			visibility === 'group' ? null : { visibility: 'group', publishedBy: null, publishedAt: null }
	});
}
