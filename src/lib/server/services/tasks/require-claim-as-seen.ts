import { and, asc, eq } from 'drizzle-orm';
import type { Reader } from '../../db/client';
import { audit } from '../../db/schema';
import { ServiceError } from '../../errors';
import { changedClaimFields, type ChangedField } from '../activity/claim-fields';
import { asRecorded } from '../activity/recorded';
import type { ClaimRow } from '../claims/find-claim';

/**
 * What is handed in is about the claim as its form showed it.
 * @throws ServiceError conflict that says what was changed since
 */
export async function requireClaimAsSeen(
	read: Reader,
	claim: ClaimRow,
	seen: number
): Promise<void> {
	if (claim.version === seen) return;
	const changes = (await changesSince(read, claim, seen)).map(inWords).join('; ');
	throw new ServiceError(
		'conflict',
		`Claim ${claim.number} was edited since you opened this form${changes ? `: ${changes}` : ''}. Your text is kept; look at the claim as it is now, and submit again what still holds.`
	);
}

/** Each edit raises the version by one, and its audit row has the claim before and after. */
async function changesSince(
	read: Reader,
	claim: ClaimRow,
	seen: number
): Promise<readonly ChangedField[]> {
	const edits = await read
		.select({ before: audit.before, after: audit.after })
		.from(audit)
		.where(
			and(eq(audit.entity, 'claim'), eq(audit.entityId, claim.id), eq(audit.action, 'claim.edited'))
		)
		.orderBy(asc(audit.at), asc(audit.id));
	const since = edits.slice(Math.max(0, seen - 1));
	return changedClaimFields(asRecorded(since[0]?.before), asRecorded(since.at(-1)?.after));
}

function inWords({ word, was, is, short }: ChangedField): string {
	const name = word.charAt(0).toLowerCase() + word.slice(1);
	return short ? `${name} ${was} is now ${is}` : name;
}
