import { and, eq, inArray } from 'drizzle-orm';
import { showBound } from '../../../ledger/figures';
import { readStatedValue } from '../../../ledger/stated-value';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { BoundSource } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { claims, references } from '../../db/schema';
import { printedHtml } from '../../math/printed-html';
import { mapSide, readMap } from '../inequalities/affine';
import { mapBetween } from '../inequalities/canonical-subject';
import { isPublicClaim } from '../inequalities/visibility';

/** What a claim on the maximum over a set says about the quantum maximum. */
const BOUNDS_FROM_BELOW = ['quantum', 'local', 'quantum-dimension', 'maximally-entangled'] as const;
const BOUNDS_FROM_ABOVE = [
	'quantum',
	'npa',
	'almost-quantum',
	'macroscopic-locality',
	'no-signalling'
] as const;

interface Ranked {
	/** The safe end of the reading, in the representative's normalisation. */
	readonly end: Rational;
	readonly source: BoundSource;
}

export interface ClaimedBounds {
	readonly lower: BoundSource | null;
	readonly upper: BoundSource | null;
}

/**
 * Per inequality the largest lower and the smallest upper bound on the quantum maximum among the
 * public claims in Agreement, compared by the safe end of what was printed.
 */
export async function claimedBounds(
	read: Reader,
	inequalityIds: readonly string[]
): Promise<Map<string, ClaimedBounds>> {
	if (inequalityIds.length === 0) return new Map();
	const rows = await read
		.select({ claim: claims, short: references.short, year: references.year })
		.from(claims)
		.innerJoin(references, eq(references.id, claims.referenceId))
		.where(
			and(
				inArray(claims.inequalityId, [...inequalityIds]),
				eq(claims.status, 'agreement'),
				eq(claims.state, 'active'),
				isPublicClaim
			)
		);
	const best = new Map<string, { lower: Ranked | null; upper: Ranked | null }>();
	for (const { claim, short, year } of rows) {
		if (!claim.inequalityId || claim.input.sense === 'min') continue;
		const sides = best.get(claim.inequalityId) ?? { lower: null, upper: null };
		const lower = rank(claim, 'lower', short, year);
		const upper = rank(claim, 'upper', short, year);
		best.set(claim.inequalityId, {
			lower: better(sides.lower, lower, (a, b) => a.compare(b) > 0),
			upper: better(sides.upper, upper, (a, b) => a.compare(b) < 0)
		});
	}
	return new Map(
		[...best].map(([id, { lower, upper }]) => [
			id,
			{ lower: lower?.source ?? null, upper: upper?.source ?? null }
		])
	);
}

function rank(
	claim: typeof claims.$inferSelect,
	side: 'lower' | 'upper',
	short: string,
	year: number | null
): Ranked | null {
	const quantities: readonly string[] = side === 'lower' ? BOUNDS_FROM_BELOW : BOUNDS_FROM_ABOVE;
	const says = claim.relation === '=' || claim.relation === (side === 'lower' ? '>=' : '<=');
	if (!says || !quantities.includes(claim.quantity)) return null;
	const reading = readStatedValue(claim.printed, claim.reading);
	const identity = claim.scale === '1' && claim.shift === '0';
	const back = readMap(mapBetween(claim, { scale: '1', shift: '0' }));
	const end = mapSide(back, side === 'lower' ? reading.low : reading.high, side);
	return {
		end,
		source: {
			printed: identity ? claim.printed : showBound(end, side),
			printedHtml: identity ? printedHtml(claim.printed) : null,
			quantityLabel: claim.quantity === 'quantum' ? null : claim.quantityLabel,
			claimId: claim.id,
			referenceId: claim.referenceId,
			short,
			year
		}
	};
}

/** The earlier paper keeps the place when two say the same. */
function better(
	a: Ranked | null,
	b: Ranked | null,
	tighter: (b: Rational, a: Rational) => boolean
): Ranked | null {
	if (!a || !b) return a ?? b;
	if (a.end.equals(b.end)) return (b.source.year ?? Infinity) < (a.source.year ?? Infinity) ? b : a;
	return tighter(b.end, a.end) ? b : a;
}
