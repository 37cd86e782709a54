import { and, eq } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { claimVersions } from '../../db/schema';
import type { ClaimRow } from '../claims/find-claim';

/** Who last wrote what the claim now says; null for a claim whose versions are gone. */
export async function editorOf(read: Reader, claim: ClaimRow): Promise<string | null> {
	const [row] = await read
		.select({ changedBy: claimVersions.changedBy })
		.from(claimVersions)
		.where(and(eq(claimVersions.claimId, claim.id), eq(claimVersions.version, claim.version)));
	return row?.changedBy ?? null;
}

/**
 * Whether this person entered the claim or wrote any of its versions: then somebody else has to
 * compare it with the paper. Not the present version alone: a word that another one changed in the
 * note would make the value that somebody typed theirs to confirm.
 */
export async function wroteAny(read: Reader, claim: ClaimRow, userId: string): Promise<boolean> {
	if (claim.createdBy === userId) return true;
	const versions = await read.$count(
		claimVersions,
		and(eq(claimVersions.claimId, claim.id), eq(claimVersions.changedBy, userId))
	);
	return versions > 0;
}
