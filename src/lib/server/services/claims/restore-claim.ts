import type { GroupContext } from '../../context';
import { changeClaim } from './change-claim';
import { deriveClaim } from './derive-claim';

/** Makes a withdrawn or superseded claim active again. */
export async function restoreClaim(ctx: GroupContext, number: number): Promise<void> {
	await changeClaim(ctx, number, {
		action: 'withdraw-claim',
		audit: 'claim.restored',
		refusal: 'Only who entered a claim and maintainers may restore it.',
		change: (_, { state }) =>
			state === 'active' ? null : { state: 'active', supersededById: null },
		// Its tasks stood still: a reproduction that was contradicted meanwhile is reopened now.
		afterwards: (tx, { id }) => deriveClaim(tx, id, ctx.now())
	});
}
