import type { GroupContext } from '../../context';
import { cancelTasksOfClaim } from '../tasks/cancel-tasks-of-claim';
import { changeClaim } from './change-claim';

/** Kept and struck through, never deleted; what was public is no longer, and its tasks end. */
export async function withdrawClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'withdraw-claim',
		audit: 'claim.withdrawn',
		refusal: 'Only who entered a claim and maintainers may withdraw it.',
		async change(tx, { id, state }) {
			if (state === 'withdrawn') return null;
			await cancelTasksOfClaim(tx, ctx, id, 'The claim was withdrawn.');
			return { state: 'withdrawn', visibility: 'group', publishedBy: null, publishedAt: null };
		}
	});
}
