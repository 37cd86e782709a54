import { sharedDigits, showBound, showEnclosure, type Side } from '../../ledger/figures';

/** From so many shared digits behind the point on, they alone say where the value lies. */
const ENOUGH_PLACES = 6;

export const placesOf = (text: string): number => /\.(\d+)/.exec(text)?.[1]?.length ?? 0;

export interface KnownSides {
	readonly lower: string | null;
	readonly upper: string | null;
}

/**
 * Both sides with the digits that say something: two past the place where they part, rounded
 * outward. All digits stay in the download. `atLeast` keeps so many places, as a claim may have more.
 */
export function knownSides({ lower, upper }: KnownSides, atLeast = 0): KnownSides {
	if (lower === null || upper === null || lower === upper) return { lower, upper };
	const shown = showEnclosure(lower, upper);
	const places = Math.max(atLeast, placesOf(shown.lower ?? ''), placesOf(shown.upper ?? ''));
	const cut = (text: string, side: Side) =>
		placesOf(text) > places ? showBound(text, side, places) : text;
	return { lower: cut(lower, 'lower'), upper: cut(upper, 'upper') };
}

/** What two sides of an enclosure say in one line: the digits they share, or both. */
export function shownBetween(lower: string | null, upper: string | null): string | null {
	if (lower === null) return upper === null ? null : `≤ ${upper}`;
	if (upper === null) return `≥ ${lower}`;
	const shared = sharedDigits(lower, upper);
	const places = shared?.split('.')[1]?.length ?? 0;
	if (shared !== null && (lower === upper || places >= ENOUGH_PLACES)) return shared;
	const sides = knownSides({ lower, upper });
	return `${sides.lower} … ${sides.upper}`;
}

/** Characters in front of the decimal point of a figure, its sign with them; null: no such figure. */
export function beforePoint(text: string): number | null {
	return /^[\u2212-]?\d+(?=\.|$|\s|…)/.exec(text)?.[0].length ?? null;
}

/** How many digits each figure of a column moves right for their points to meet. */
export function padding(column: readonly (string | null)[]): (text: string | null) => number {
	const before = (text: string | null) => (text === null ? null : beforePoint(text));
	const widest = Math.max(0, ...column.map((text) => before(text) ?? 0));
	return (text) => widest - (before(text) ?? widest);
}
