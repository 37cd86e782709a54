import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { changeClaim } from './change-claim';

/** Asks for a claim to be public; a maintainer decides. */
export async function proposeClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'propose-public',
		audit: 'claim.proposed',
		refusal: 'Only who entered a claim and maintainers may propose it.',
		change(_, { state, visibility }) {
			if (state === 'withdrawn') throw new ServiceError('conflict', 'This claim is withdrawn.');
			return visibility === 'group' ? { visibility: 'proposed' } : null;
		}
	});
}
