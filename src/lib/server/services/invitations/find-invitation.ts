import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Role } from '../../../ledger/roles';
import type { Reader } from '../../db/client';
import type { Context, UserContext } from '../../context';
import { groups, invitations, memberships } from '../../db/schema';
import { hashToken } from '../../ids';

export interface OpenInvitation {
	readonly id: string;
	readonly role: Role;
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
