import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { requireStill, setMembership } from './membership';

const REFUSAL = 'Only owners take others out of a group.';

/**
 * Takes someone else out of the group, from their next request on.
 * @throws ServiceError forbidden, not-found, conflict (oneself: that is leaving)
 */
export async function removeMember(ctx: GroupContext, userId: string): Promise<void> {
	if (!may(ctx.role, 'remove-member')) throw new ServiceError('forbidden', REFUSAL);
	if (userId === ctx.actor.id) {
		throw new ServiceError('conflict', 'To go yourself, leave the group.');
	}
	await ctx.db.write(async (tx) => {
		await requireStill(tx, ctx, 'remove-member', REFUSAL);
		const role = await setMembership(tx, ctx, userId, null);
		await recordAudit(tx, ctx, {
			action: 'member.removed',
			entity: 'user',
			entityId: userId,
			groupId: ctx.group.id,
			before: { role },
			after: { role: null }
		});
	});
}
