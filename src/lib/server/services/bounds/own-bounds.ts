import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { Reader } from '../../db/client';
import { claims, recomputations } from '../../db/schema';
import { IDENTITY_TEXT, mapSides, readMap } from '../inequalities/affine';
import { isPublicClaim } from '../inequalities/visibility';

export interface OwnBound {
	readonly lower: Rational | null;
	readonly upper: Rational | null;
}

const IDENTITY = readMap(IDENTITY_TEXT);
/** What reaches a value by a quantum strategy, and what no quantum strategy exceeds. */
const FROM_BELOW = ['quantum', 'see-saw', 'local'];
const FROM_ABOVE = ['quantum', 'npa', 'no-signalling'];

/**
 * What the checked runs that public claims asked for prove about the quantum maximum, by
 * inequality; the stations are apart.
 */
export async function ownBounds(
	read: Reader,
	inequalityIds: readonly string[]
): Promise<Map<string, OwnBound[]>> {
	const found = new Map<string, OwnBound[]>();
	if (inequalityIds.length === 0) return found;
	const asked = read.select({ id: claims.recomputationId }).from(claims).where(isPublicClaim);
	const rows = await read
		.select({
			inequalityId: recomputations.inequalityId,
			problem: recomputations.problem,
			lower: recomputations.lower,
			upper: recomputations.upper,
			exact: recomputations.exact
		})
		.from(recomputations)
		.where(
			and(
				inArray(recomputations.inequalityId, [...inequalityIds]),
				inArray(recomputations.id, asked),
				isNull(recomputations.station),
				eq(recomputations.checked, true)
			)
		);
	for (const { inequalityId, problem, ...sides } of rows) {
		if (!inequalityId || problem.sense !== 'max' || problem.constraints.length > 0) continue;
		const { lower, upper } = mapSides(IDENTITY, sides);
		const bound = {
			lower: FROM_BELOW.includes(problem.quantity) ? lower : null,
			upper: FROM_ABOVE.includes(problem.quantity) ? upper : null
		};
		found.set(inequalityId, [...(found.get(inequalityId) ?? []), bound]);
	}
	return found;
}
