import { and, eq } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import { claims } from '../../db/schema';
import { ServiceError } from '../../errors';

export type ClaimRow = typeof claims.$inferSelect;

/** @throws ServiceError not-found, also for a claim of another group */
export async function findClaim(
	read: Reader,
	ctx: GroupContext,
	number: number
): Promise<ClaimRow> {
	const [row] = Number.isSafeInteger(number)
		? await read
				.select()
				.from(claims)
				.where(and(eq(claims.groupId, ctx.group.id), eq(claims.number, number)))
		: [];
	if (!row) throw new ServiceError('not-found', `There is no claim ${number} in this group.`);
	return row;
}

export const isOwn = (ctx: GroupContext, claim: Pick<ClaimRow, 'createdBy'>) =>
	claim.createdBy === ctx.actor.id;
