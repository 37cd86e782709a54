import type { GroupContext } from '../../context';
import { changeClaim } from './change-claim';

/** Takes a claim back from the public, or takes back (a maintainer: declines) a proposal. */
export async function unpublishClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		// Whoever may propose a claim may take the proposal back; what is public takes a maintainer.
		action: ({ visibility }) => (visibility === 'proposed' ? 'propose-public' : 'unpublish-claim'),
		audit: 'claim.unpublished',
		refusal: 'Only a maintainer takes a claim back from the public.',
		change: (_, { visibility }) =>
			visibility === 'group' ? null : { visibility: 'group', publishedBy: null, publishedAt: null }
	});
}
