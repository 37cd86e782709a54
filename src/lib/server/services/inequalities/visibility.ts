import { and, eq, ne, or } from 'drizzle-orm';
import type { Context } from '../../context';
import type { Reader } from '../../db/client';
import { claims, inequalities, memberships } from '../../db/schema';
import { familyOfDigest } from './catalogue';

/**
 * Rows are shared by all groups, but that one exists may tell what a group is working on: a group
 * sees those it has claims on, those with a public claim, and the recognised families.
 */
export async function isVisibleToGroup(
	read: Reader,
	inequalityId: string,
	groupId: string
): Promise<boolean> {
	const [row] = await read
		.select({ digest: inequalities.digest })
		.from(inequalities)
		.where(eq(inequalities.id, inequalityId));
	if (!row) return false;
	if (familyOfDigest(row.digest)) return true;
	const [claim] = await read
		.select({ id: claims.id })
		.from(claims)
		.where(
			and(eq(claims.inequalityId, inequalityId), or(eq(claims.groupId, groupId), isPublicClaim))
		)
		.limit(1);
	return claim !== undefined;
}

/** Whether a person, or a visitor, may see an inequality's page somewhere. */
export async function mayViewInequality(
	ctx: Context,
	{ id, digest }: { readonly id: string; readonly digest: string }
): Promise<boolean> {
	const { read } = ctx.db;
	if (await isPublicInequality(read, id)) return true;
	if (!ctx.actor) return false;
	if (familyOfDigest(digest)) return true;
	const [claim] = await read
		.select({ id: claims.id })
		.from(claims)
		.innerJoin(memberships, eq(memberships.groupId, claims.groupId))
		.where(and(eq(claims.inequalityId, id), eq(memberships.userId, ctx.actor.id)))
		.limit(1);
	return claim !== undefined;
}

/**
 * What the public may see of claims: published and not withdrawn; a discrepancy only while a second
 * person has confirmed this version against the paper, also where it became one afterwards. The
 * same rule as `isPublic` in ledger/publication.ts.
 */
export const isPublicClaim = and(
	eq(claims.visibility, 'public'),
	ne(claims.state, 'withdrawn'),
	or(ne(claims.status, 'discrepancy'), eq(claims.confirmedVersion, claims.version))
);

/** The public sees an inequality once a claim on it is public. */
export async function isPublicInequality(read: Reader, inequalityId: string): Promise<boolean> {
	const [claim] = await read
		.select({ id: claims.id })
		.from(claims)
		.where(and(eq(claims.inequalityId, inequalityId), isPublicClaim))
		.limit(1);
	return claim !== undefined;
}
