import { and, eq } from 'drizzle-orm';
import { may } from '../../../ledger/policy';
import type { GroupContext } from '../../context';
import { claimNotices } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { findClaim, isOwn } from '../claims/find-claim';

/** Takes an erratum or a newer version off a claim; the paper stays with the group. */
export async function removeNotice(ctx: GroupContext, number: number, id: string): Promise<void> {
	await ctx.db.write(async (tx) => {
		const claim = await findClaim(tx, ctx, number);
		if (!may(ctx.role, 'attach-notice', { own: isOwn(ctx, claim) })) {
			throw new ServiceError(
				'forbidden',
				'Only who entered a claim and maintainers remove an erratum or a newer version.'
			);
		}
		const [notice] = await tx
			.delete(claimNotices)
			.where(and(eq(claimNotices.claimId, claim.id), eq(claimNotices.id, id)))
			.returning();
		if (!notice) throw new ServiceError('not-found', 'This is not attached to the claim any more.');
		const { kind, referenceId, note } = notice;
		await recordAudit(tx, ctx, {
			action: 'claim.notice-removed',
			entity: 'claim',
			entityId: claim.id,
			groupId: ctx.group.id,
			before: { noticeId: id, kind, referenceId, note }
		});
	});
}
