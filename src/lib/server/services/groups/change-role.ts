import { mayChangeRoles } from '../../../ledger/group-policy';
import { changeRoleInput } from '../../../schemas/group';
import type { GroupContext } from '../../context';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { requireStill, setMembership } from './membership';

const REFUSAL = 'Only owners give roles.';

/**
 * Gives a member another role; it counts from their next request on.
 * @throws ServiceError invalid, forbidden, not-found, conflict (the last owner)
 */
export async function changeRole(
	ctx: GroupContext,
	input: { readonly userId: string; readonly role: string }
): Promise<void> {
	if (!mayChangeRoles(ctx.role)) throw new ServiceError('forbidden', REFUSAL);
	const { userId, role } = parseInput(changeRoleInput, input);
	await ctx.db.write(async (tx) => {
		await requireStill(tx, ctx, 'change-role', REFUSAL);
		const from = await setMembership(tx, ctx, userId, role);
		if (from === role) return;
		await recordAudit(tx, ctx, {
			action: 'member.role-changed',
			entity: 'user',
			entityId: userId,
			groupId: ctx.group.id,
			before: { role: from },
			after: { role }
		});
	});
}
