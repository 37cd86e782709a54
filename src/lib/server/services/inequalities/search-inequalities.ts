import { and, asc, eq, inArray, or, sql } from 'drizzle-orm';
import type { InequalityRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, inequalities } from '../../db/schema';
import { INEQUALITY_TEXT, contains, searchWords } from '../search-words';
import { recognisedDigests } from './catalogue';
import { inequalityRows } from './inequality-rows';
import { isPublicClaim } from './visibility';

const MOST_FOUND = 50;

/**
 * Known inequalities whose name, scenario or formula holds each word; all that the group may see
 * when there is none. Those the group has claims on come first.
 */
export async function searchInequalities(
	ctx: GroupContext,
	text: string
): Promise<readonly InequalityRow[]> {
	const { read } = ctx.db;
	const own = eq(claims.groupId, ctx.group.id);
	const visible = read
		.select({ id: claims.inequalityId })
		.from(claims)
		.where(or(own, isPublicClaim));
	const mine = read.select({ id: claims.inequalityId }).from(claims).where(own);
	const rows = await read
		.select()
		.from(inequalities)
		.where(
			and(
				or(
					inArray(inequalities.digest, [...recognisedDigests()]),
					inArray(inequalities.id, visible)
				),
				...searchWords(text).map((word) => contains(INEQUALITY_TEXT, word))
			)
		)
		.orderBy(
			sql`${inequalities.id} in ${mine} desc`,
			asc(inequalities.parties),
			asc(sql`${inequalities.name} is null`),
			asc(inequalities.name)
		)
		.limit(MOST_FOUND);
	return inequalityRows(read, rows, own);
}
