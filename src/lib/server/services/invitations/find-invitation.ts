import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Role } from '../../../ledger/roles';
import type { Reader } from '../../db/client';
import type { Context } from '../../context';
import { groups, invitations } from '../../db/schema';
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
