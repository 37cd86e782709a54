import { and, desc, eq } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { submissions } from '../../db/schema';
import type { ClaimRow } from './find-claim';
import { quantityKey } from './quantity-key';

/**
 * When the newest value a person found was accepted by another, for a claim whose verdict rests on
 * such values; null for every other claim. Without names, so for everybody.
 */
export async function reproducedAt(read: Reader, claim: ClaimRow): Promise<string | null> {
	if (claim.verdict.enclosure?.worth !== 'person') return null;
	const [row] = await read
		.select({ at: submissions.decidedAt })
		.from(submissions)
		.where(
			and(
				eq(submissions.claimId, claim.id),
				eq(submissions.kind, 'value'),
				eq(submissions.state, 'accepted'),
				eq(submissions.quantityKey, quantityKey(claim))
			)
		)
		.orderBy(desc(submissions.decidedAt))
		.limit(1);
	return row?.at?.toISOString() ?? null;
}
