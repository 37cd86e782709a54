import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Role } from '../../../ledger/roles';
import type { Reader } from '../../db/client';
import type { Context, UserContext } from '../../context';
import { groups, invitations, memberships } from '../../db/schema';
import { hashToken } from '../../ids';

export interface OpenInvitation {
	readonly id: string;
	readonly role: Role;
	/** Where it was mailed to; null for a link that is passed on. */
	readonly email: string | null;
	readonly group: { readonly id: string; readonly slug: string; readonly name: string };
}

/** What a joining link stands for; null when it is unknown, used, revoked or too old. */
export async function findInvitation(
	ctx: Context,
	token: string,
	reader: Reader = ctx.db.read
): Promise<OpenInvitation | null> {
	const [found] = await reader
		.select({
			id: invitations.id,
			role: invitations.role,
			email: invitations.email,
			group: { id: groups.id, slug: groups.slug, name: groups.name }
		})
		.from(invitations)
		.innerJoin(groups, eq(groups.id, invitations.groupId))
		.where(
			and(
				eq(invitations.tokenHash, hashToken(token)),
				isNull(invitations.usedAt),
				isNull(invitations.revokedAt),
				gt(invitations.expiresAt, ctx.now())
			)
		);
	return found ?? null;
}

/** The address a mailed joining link was sent to, by the link's path; for signing up with it. */
export async function invitedAddress(ctx: Context, path: string): Promise<string> {
	const token = /^\/join\/([\w-]{20,100})$/.exec(path)?.[1];
	return (token && (await findInvitation(ctx, token))?.email) ?? '';
}

/**
 * The group of a link, also a used or old one, for someone who is in that group: to them it tells
 * nothing new. Null for anybody else.
 */
export async function findJoinedGroup(
	ctx: UserContext,
	token: string,
	reader: Reader = ctx.db.read
): Promise<{ readonly slug: string } | null> {
	const [found] = await reader
		.select({ slug: groups.slug })
		.from(invitations)
		.innerJoin(groups, eq(groups.id, invitations.groupId))
		.innerJoin(memberships, eq(memberships.groupId, groups.id))
		.where(and(eq(invitations.tokenHash, hashToken(token)), eq(memberships.userId, ctx.actor.id)));
	return found ?? null;
}
