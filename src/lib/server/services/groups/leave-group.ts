import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { setMembership } from './membership';

/**
 * Ends one's own membership. What one entered stays with the group.
 * @throws ServiceError not-found (left already), conflict (the last owner)
 */
export async function leaveGroup(ctx: GroupContext): Promise<void> {
	if (!may(ctx.role, 'remove-member', { own: true })) {
		throw new ServiceError('forbidden', 'You are not in this group.');
	}
	await ctx.db.write(async (tx) => {
		const role = await setMembership(
			tx,
			ctx,
			ctx.actor.id,
			null,
			'You are its only owner, and a group keeps at least one owner: hand it over first.'
		);
		await recordAudit(tx, ctx, {
			action: 'member.left',
			entity: 'user',
			entityId: ctx.actor.id,
			groupId: ctx.group.id,
			before: { role },
			after: { role: null }
		});
	});
}
