import { eq } from 'drizzle-orm';
import { may, type Action } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import type { Transaction } from '../../db/client';
import { claims } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { findClaim, isOwn, type ClaimRow } from './find-claim';

type Change = Partial<
	Pick<ClaimRow, 'state' | 'supersededById' | 'visibility' | 'publishedBy' | 'publishedAt'>
>;

export interface ClaimChange {
	readonly action: Action | ((claim: ClaimRow) => Action);
	/** For the audit: `claim.withdrawn`. */
	readonly audit: string;
	/** Why the role does not suffice. */
	readonly refusal: string;
	/** The columns to change; null: nothing to do. @throws ServiceError when it can't be done */
	change(tx: Transaction, claim: ClaimRow): Promise<Change | null> | Change | null;
	/** What follows from it, in the same transaction. */
	afterwards?(tx: Transaction, claim: ClaimRow): Promise<void>;
}

/** A change of a claim's state or visibility: policy, check and write, with its audit row. */
export async function changeClaim(
	ctx: GroupContext,
	number: number,
	{ action, audit, refusal, change, afterwards }: ClaimChange
): Promise<void> {
	await ctx.db.write(async (tx) => {
		const claim = await findClaim(tx, ctx, number);
		const asked = typeof action === 'string' ? action : action(claim);
		if (!may(ctx.role, asked, { own: isOwn(ctx, claim) })) {
			throw new ServiceError('forbidden', refusal);
		}
		const values = await change(tx, claim);
		if (!values) return;
		await tx
			.update(claims)
			.set({ ...values, updatedAt: ctx.now() })
			.where(eq(claims.id, claim.id));
		const { state, supersededById, visibility } = claim;
		await recordAudit(tx, ctx, {
			action: audit,
			entity: 'claim',
			entityId: claim.id,
			groupId: ctx.group.id,
			before: { state, supersededById, visibility },
			after: values
		});
		await afterwards?.(tx, claim);
	});
}
