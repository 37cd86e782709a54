import type { GroupContext } from '../../context';
import { changeClaim } from './change-claim';

/** Kept and struck through, never deleted; what was public is no longer. */
export async function withdrawClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'withdraw-claim',
		audit: 'claim.withdrawn',
		refusal: 'Only who entered a claim and maintainers may withdraw it.',
		change: (_, { state }) =>
			state === 'withdrawn'
				? null
				: { state: 'withdrawn', visibility: 'group', publishedBy: null, publishedAt: null }
	});
}
