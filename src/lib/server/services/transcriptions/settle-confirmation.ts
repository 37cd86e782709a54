import { and, desc, eq, isNull } from 'drizzle-orm';
import type { Transaction } from '../../db/client';
import { claims, transcriptionChecks } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';

export type Confirmation = Pick<ClaimRow, 'confirmedBy' | 'confirmedVersion'>;

const NOT_CONFIRMED: Confirmation = { confirmedBy: null, confirmedVersion: null };

/**
 * Derives from the comparisons on record whether the claim's present version is confirmed: the
 * newest that was not voided decides, so that what one finds wrong takes an earlier confirmation
 * back.
 */
export async function settleConfirmation(
	tx: Transaction,
	claim: Pick<ClaimRow, 'id' | 'version'>,
	now: Date
): Promise<Confirmation> {
	const [newest] = await tx
		.select()
		.from(transcriptionChecks)
		.where(
			and(
				eq(transcriptionChecks.claimId, claim.id),
				eq(transcriptionChecks.claimVersion, claim.version),
				isNull(transcriptionChecks.voidedAt)
			)
		)
		.orderBy(desc(transcriptionChecks.checkedAt), desc(transcriptionChecks.id))
		.limit(1);
	const right = newest?.valueMatches && newest.locatorMatches && newest.inequalityMatches;
	const confirmation = right
		? { confirmedBy: newest.checkedBy, confirmedVersion: claim.version }
		: NOT_CONFIRMED;
	await tx
		.update(claims)
		.set({ ...confirmation, updatedAt: now })
		.where(eq(claims.id, claim.id));
	return confirmation;
}
