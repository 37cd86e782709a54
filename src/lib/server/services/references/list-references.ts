import { and, asc, count, eq, ne } from 'drizzle-orm';
import type { ReferenceRow } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, references } from '../../db/schema';
import { referenceView } from './reference-view';

/** The group's papers by label, with how many claims (not withdrawn) each has. */
export async function listReferences(ctx: GroupContext): Promise<readonly ReferenceRow[]> {
	const rows = await ctx.db.read
		.select({ reference: references, claims: count(claims.id) })
		.from(references)
		.leftJoin(claims, and(eq(claims.referenceId, references.id), ne(claims.state, 'withdrawn')))
		.where(eq(references.groupId, ctx.group.id))
		.groupBy(references.id)
		.orderBy(asc(references.short), asc(references.title));
	return rows.map(({ reference, claims: number }) => ({
		...referenceView(reference),
		claims: number
	}));
}
