import { asc, eq, inArray, sql } from 'drizzle-orm';
import type { InequalityRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, inequalities } from '../../db/schema';
import { inequalityRows } from './inequality-rows';

/** Those the group has claims on. */
export async function listInequalities(ctx: GroupContext): Promise<readonly InequalityRow[]> {
	const { read } = ctx.db;
	const own = eq(claims.groupId, ctx.group.id);
	const rows = await read
		.select()
		.from(inequalities)
		.where(
			inArray(inequalities.id, read.select({ id: claims.inequalityId }).from(claims).where(own))
		)
		.orderBy(
			asc(inequalities.parties),
			asc(sql`${inequalities.name} is null`),
			asc(inequalities.name),
			asc(inequalities.createdAt)
		);
	return inequalityRows(read, rows, own);
}
