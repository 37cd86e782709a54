import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { changeClaim } from './change-claim';
import { tellProposed } from './tell-proposed';

/** Asks for a claim to be public; a maintainer decides. */
export async function proposeClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'propose-public',
		audit: 'claim.proposed',
		refusal: 'Only who entered a claim and maintainers may propose it.',
		async change(tx, { id, state, visibility }) {
			if (state === 'withdrawn') throw new ServiceError('conflict', 'This claim is withdrawn.');
			if (visibility !== 'group') return null;
			await tellProposed(tx, ctx, id);
			return { visibility: 'proposed' };
		}
	});
}
