import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { requireStill, roleOf, setMembership } from './membership';

const REFUSAL = 'Only owners hand a group over.';

/**
 * Makes another member an owner and the actor a maintainer, both or neither.
 * @throws ServiceError forbidden, invalid (nobody chosen), not-found (not in the group), conflict (oneself)
 */
export async function transferOwnership(ctx: GroupContext, userId: string): Promise<void> {
	if (!may(ctx.role, 'transfer-ownership')) throw new ServiceError('forbidden', REFUSAL);
	if (userId === '') throw new ServiceError('invalid', 'Choose who is to own the group.');
	if (userId === ctx.actor.id) {
		throw new ServiceError('conflict', 'You own it already: choose somebody else.');
	}
	await ctx.db.write(async (tx) => {
		await requireStill(tx, ctx, 'transfer-ownership', REFUSAL);
		const role = await roleOf(tx, ctx, userId);
		await setMembership(tx, ctx, userId, 'owner');
		await setMembership(tx, ctx, ctx.actor.id, 'maintainer');
		await recordAudit(tx, ctx, {
			action: 'group.ownership-transferred',
			entity: 'user',
			entityId: userId,
			groupId: ctx.group.id,
			before: { from: { userId: ctx.actor.id, role: 'owner' }, to: { userId, role } },
			after: {
				from: { userId: ctx.actor.id, role: 'maintainer' },
				to: { userId, role: 'owner' }
			}
		});
	});
}
