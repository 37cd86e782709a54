import { and, eq } from 'drizzle-orm';
import { leavesNoOwner, mayChangeRoles } from '../../../ledger/group-policy';
import type { Role } from '../../../ledger/roles';
import { changeRoleInput } from '../../../schemas/group';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { memberships } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

/**
 * Gives a member another role; it counts from their next request on.
 * @throws ServiceError forbidden, not-found, conflict (the last owner)
 */
export async function changeRole(
	ctx: GroupContext,
	input: { readonly userId: string; readonly role: string }
): Promise<void> {
	if (!mayChangeRoles(ctx.role)) throw new ServiceError('forbidden', 'Only owners give roles.');
	const { userId, role } = parseInput(changeRoleInput, input);
	await setMembership(ctx, userId, role);
}

/**
 * Takes someone out of the group; anyone may leave by themselves.
 * @throws ServiceError forbidden, not-found, conflict (the last owner)
 */
export async function removeMember(ctx: GroupContext, userId: string): Promise<void> {
	if (userId !== ctx.actor.id && !mayChangeRoles(ctx.role)) {
		throw new ServiceError('forbidden', 'Only owners take others out of a group.');
	}
	await setMembership(ctx, userId, null);
}

async function setMembership(ctx: GroupContext, userId: string, role: Role | null): Promise<void> {
	const group = eq(memberships.groupId, ctx.group.id);
	const membership = and(group, eq(memberships.userId, userId));
	await ctx.db.write(async (tx) => {
		const [current] = await tx.select().from(memberships).where(membership);
		if (!current) throw new ServiceError('not-found', 'This person is not in the group.');
		if (current.role === role) return;
		if (leavesNoOwner(await countOwners(tx, ctx.group.id), current.role, role)) {
			throw new ServiceError('conflict', 'A group keeps at least one owner: name another first.');
		}
		if (role) await tx.update(memberships).set({ role }).where(membership);
		else await tx.delete(memberships).where(membership);
		await recordAudit(tx, ctx, {
			action: role ? 'member.role-changed' : 'member.removed',
			entity: 'user',
			entityId: userId,
			groupId: ctx.group.id,
			before: { role: current.role },
			after: { role }
		});
	});
}

function countOwners(tx: Transaction, groupId: string): Promise<number> {
	return tx.$count(
		memberships,
		and(eq(memberships.groupId, groupId), eq(memberships.role, 'owner'))
	);
}
