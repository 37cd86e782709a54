import { and, asc, eq, inArray } from 'drizzle-orm';
import type { LedgerRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims } from '../../db/schema';
import { claimRows, selectClaimRows } from './claim-rows';

/** The rows of some of the group's claims, by number; for the live update of a table. */
export async function ledgerRows(
	ctx: GroupContext,
	numbers: readonly number[]
): Promise<readonly LedgerRow[]> {
	if (numbers.length === 0) return [];
	const selected = await selectClaimRows(
		ctx.db.read,
		and(eq(claims.groupId, ctx.group.id), inArray(claims.number, [...numbers]))
	).orderBy(asc(claims.number));
	return claimRows(ctx.db.read, selected, ctx.now(), [ctx.group.id]);
}
