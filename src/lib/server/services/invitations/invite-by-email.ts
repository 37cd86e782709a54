import { and, eq, gt, inArray, isNull } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { Role } from '../../../ledger/roles';
import { mailInvitationInput } from '../../../schemas/group';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { invitations, memberships, users } from '../../db/schema';
import { derivedToken } from '../../derived-token';
import { ServiceError } from '../../errors';
import { hashToken, newId } from '../../ids';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';
import { expiryOf } from './create-invitation';
import { dropInvitations } from './drop-invitations';
import { queueInvitationMail } from './queue-invitation-mail';

export interface InvitedByEmail {
	/** Addresses a mail goes to. */
	readonly invited: readonly string[];
	/** Addresses of people who are in the group already; nothing is sent to them. */
	readonly members: readonly string[];
	/** Those of `invited` whose earlier invitation stopped working. */
	readonly replaced: readonly string[];
	/** Addresses the same person invited so a moment ago: that invitation stands. */
	readonly again: readonly string[];
}

/** Sent twice by a second press, a form that was sent again, or a slow answer. */
const A_MOMENT_MS = 60_000;

/**
 * Mails each address a joining link of its own, good for fourteen days; an invitation that stood
 * for the address is replaced, but for the same one that the same person made a moment ago.
 * @throws ServiceError forbidden; invalid, naming the addresses that are none
 */
export async function inviteByEmail(
	ctx: GroupContext,
	input: { readonly emails: string; readonly role: string }
): Promise<InvitedByEmail> {
	const { emails, role } = parseInput(mailInvitationInput, input);
	if (!may(ctx.role, 'invite', { invited: role })) {
		throw new ServiceError(
			'forbidden',
			'Your role does not let you invite someone with this role.'
		);
	}
	return ctx.db.write(async (tx) => {
		const members = await addressesOfMembers(tx, ctx, emails);
		const outside = emails.filter((email) => !members.includes(email));
		const before = await standingTo(tx, ctx, outside);
		const recent = before.filter((one) => isJustMade(ctx, one, role));
		const isAgain = (email: string) => recent.some((one) => one.email === email);
		const invited = outside.filter((email) => !isAgain(email));
		const standing = before.filter(({ email }) => email !== null && !isAgain(email));
		await dropInvitations(
			tx,
			ctx,
			standing.map(({ id }) => id)
		);
		for (const email of invited) await mailInvitation(tx, ctx, email, role);
		const replaced = invited.filter((email) => standing.some((one) => one.email === email));
		return { invited, members, replaced, again: outside.filter(isAgain) };
	});
}

async function addressesOfMembers(
	tx: Transaction,
	ctx: GroupContext,
	emails: readonly string[]
): Promise<readonly string[]> {
	const found = await tx
		.select({ email: users.email })
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(and(eq(memberships.groupId, ctx.group.id), inArray(users.email, [...emails])));
	const known = new Set(found.map(({ email }) => email));
	return emails.filter((email) => known.has(email));
}

function standingTo(tx: Transaction, ctx: GroupContext, emails: readonly string[]) {
	return tx
		.select({
			id: invitations.id,
			email: invitations.email,
			role: invitations.role,
			createdBy: invitations.createdBy,
			createdAt: invitations.createdAt
		})
		.from(invitations)
		.where(
			and(
				eq(invitations.groupId, ctx.group.id),
				inArray(invitations.email, [...emails]),
				isNull(invitations.usedAt),
				isNull(invitations.revokedAt),
				gt(invitations.expiresAt, ctx.now())
			)
		);
}

function isJustMade(
	ctx: GroupContext,
	made: { readonly role: Role; readonly createdBy: string; readonly createdAt: Date },
	role: Role
): boolean {
	if (made.createdBy !== ctx.actor.id || made.role !== role) return false;
	return ctx.now().getTime() - made.createdAt.getTime() < A_MOMENT_MS;
}

async function mailInvitation(
	tx: Transaction,
	ctx: GroupContext,
	email: string,
	role: Role
): Promise<void> {
	const id = newId();
	const createdAt = ctx.now();
	const expiresAt = expiryOf(createdAt);
	await tx.insert(invitations).values({
		id,
		groupId: ctx.group.id,
		// Derived, so that the mail can carry the link though only the hash is kept.
		tokenHash: hashToken(derivedToken('invitation', id)),
		role,
		email,
		createdBy: ctx.actor.id,
		createdAt,
		expiresAt
	});
	await queueInvitationMail(tx, id, createdAt);
	await recordAudit(tx, ctx, {
		action: 'invitation.mailed',
		entity: 'invitation',
		entityId: id,
		groupId: ctx.group.id,
		after: { email, role, expiresAt: expiresAt.toISOString() }
	});
}
