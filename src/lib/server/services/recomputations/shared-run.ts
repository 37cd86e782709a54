import { and, eq, isNotNull, or, sql } from 'drizzle-orm';
import { recomputations } from '../../db/schema';

/** A maximum of the functional alone: no minimum, no further constraints. */
const PLAIN_MAXIMUM = sql`json_extract(${recomputations.problem}, '$.sense') = 'max'
	and json_array_length(${recomputations.problem}, '$.constraints') = 0`;

/**
 * A run that belongs to its inequality, for everyone who sees that: a station, or any checked plain
 * maximum. What it proves is a fact; it says nothing of the claim that asked for it.
 */
export const isSharedRun = or(
	isNotNull(recomputations.station),
	and(isNotNull(recomputations.inequalityId), eq(recomputations.checked, true), PLAIN_MAXIMUM)
);
