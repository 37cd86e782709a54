import { sql } from 'drizzle-orm';
import { claims, transcriptionChecks } from '../../db/schema';

const { claimId, claimVersion, voidedAt, checkedAt, id } = transcriptionChecks;
const { valueMatches, locatorMatches, inequalityMatches } = transcriptionChecks;

/**
 * The newest comparison of the claim's present version that was not voided found something not as
 * in the paper: a column of any query over claims, for lists. By the index on claim and version.
 */
export const isDisputedClaim = sql<boolean>`coalesce((
	select not (${valueMatches} and ${locatorMatches} and ${inequalityMatches})
	from ${transcriptionChecks}
	where ${claimId} = ${claims.id} and ${claimVersion} = ${claims.version} and ${voidedAt} is null
	order by ${checkedAt} desc, ${id} desc limit 1), 0)`.mapWith(Boolean);
