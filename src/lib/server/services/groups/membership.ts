import { and, eq, isNull } from 'drizzle-orm';
import { invitationStands, leavesNoOwner, mayKeepTasks } from '../../../ledger/group-policy';
import { may, type Action, type PolicyFacts } from '../../../ledger/policy';
import type { Role } from '../../../ledger/roles';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { calendarFeeds, invitations, memberships } from '../../db/schema';
import { ServiceError } from '../../errors';
import { dropInvitations } from '../invitations/drop-invitations';
import { releaseTasksOf } from '../tasks/release-tasks-of';

/** Whose membership, in the context's group. */
const membershipOf = (ctx: GroupContext, userId: string) =>
	and(eq(memberships.groupId, ctx.group.id), eq(memberships.userId, userId));

/** The role somebody has now; null when they are not in the group. */
export async function roleOf(
	tx: Transaction,
	ctx: GroupContext,
	userId: string
): Promise<Role | null> {
	const [found] = await tx
		.select({ role: memberships.role })
		.from(memberships)
		.where(membershipOf(ctx, userId));
	return found?.role ?? null;
}

/**
 * By the role of this moment, not of the request's start: two owners may be at it at once.
 * @throws ServiceError forbidden
 */
export async function requireStill(
	tx: Transaction,
	ctx: GroupContext,
	action: Action,
	refusal: string,
	facts: PolicyFacts = {}
): Promise<void> {
	if (!may(await roleOf(tx, ctx, ctx.actor.id), action, facts)) {
		throw new ServiceError('forbidden', refusal);
	}
}

/**
 * Gives a member another role or (null) ends the membership, with all that hangs on it: tasks go
 * back to the group, calendar feeds end, and invitations they could no longer make stop working.
 * @param lastOwner what to say when nobody would be left who owns the group
 * @returns the role they had
 * @throws ServiceError not-found, conflict (the last owner)
 */
export async function setMembership(
	tx: Transaction,
	ctx: GroupContext,
	userId: string,
	role: Role | null,
	lastOwner = 'A group keeps at least one owner: make somebody else one first.'
): Promise<Role> {
	const from = await roleOf(tx, ctx, userId);
	if (!from) throw new ServiceError('not-found', 'This person is not in the group.');
	if (from === role) return from;
	if (leavesNoOwner(await countOwners(tx, ctx.group.id), from, role)) {
		throw new ServiceError('conflict', lastOwner);
	}
	if (role) await tx.update(memberships).set({ role }).where(membershipOf(ctx, userId));
	else await endMembership(tx, ctx, userId);
	if (!mayKeepTasks(role)) await releaseTasksOf(tx, ctx, userId);
	await dropUngivable(tx, ctx, userId, role);
	return from;
}

async function endMembership(tx: Transaction, ctx: GroupContext, userId: string): Promise<void> {
	await tx.delete(memberships).where(membershipOf(ctx, userId));
	await tx
		.update(calendarFeeds)
		.set({ revokedAt: ctx.now() })
		.where(
			and(
				eq(calendarFeeds.userId, userId),
				eq(calendarFeeds.groupId, ctx.group.id),
				isNull(calendarFeeds.revokedAt)
			)
		);
}

async function dropUngivable(
	tx: Transaction,
	ctx: GroupContext,
	userId: string,
	role: Role | null
): Promise<void> {
	const made = await tx
		.select({ id: invitations.id, role: invitations.role })
		.from(invitations)
		.where(
			and(
				eq(invitations.groupId, ctx.group.id),
				eq(invitations.createdBy, userId),
				isNull(invitations.usedAt),
				isNull(invitations.revokedAt)
			)
		);
	const ungivable = made.filter((invitation) => !invitationStands(role, invitation.role));
	await dropInvitations(
		tx,
		ctx,
		ungivable.map(({ id }) => id)
	);
}

function countOwners(tx: Transaction, groupId: string): Promise<number> {
	return tx.$count(
		memberships,
		and(eq(memberships.groupId, groupId), eq(memberships.role, 'owner'))
	);
}
