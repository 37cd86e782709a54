import { and, asc, eq } from 'drizzle-orm';
import type { ReferencePage } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, references } from '../../db/schema';
import { ServiceError } from '../../errors';
import { ledgerRows } from '../claims/ledger-rows';
import { referenceView } from './reference-view';

/** @throws ServiceError not-found, also for another group's paper */
export async function showReference(ctx: GroupContext, id: string): Promise<ReferencePage> {
	const [row] = await ctx.db.read
		.select()
		.from(references)
		.where(and(eq(references.groupId, ctx.group.id), eq(references.id, id)));
	if (!row) throw new ServiceError('not-found', 'There is no such reference in this group.');
	const numbers = await ctx.db.read
		.select({ number: claims.number, state: claims.state })
		.from(claims)
		.where(and(eq(claims.groupId, ctx.group.id), eq(claims.referenceId, id)))
		.orderBy(asc(claims.number));
	return {
		...referenceView(row),
		claims: numbers.filter(({ state }) => state !== 'withdrawn').length,
		claimRows: await ledgerRows(
			ctx,
			numbers.map(({ number }) => number)
		)
	};
}
