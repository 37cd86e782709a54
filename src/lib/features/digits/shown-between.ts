import { sharedDigits } from '../../ledger/figures';

/** From so many shared digits behind the point on, they alone say where the value lies. */
const ENOUGH_PLACES = 6;

/** What two sides of an enclosure say in one line: the digits they share, or both. */
export function shownBetween(lower: string | null, upper: string | null): string | null {
	if (lower === null) return upper === null ? null : `≤ ${upper}`;
	if (upper === null) return `≥ ${lower}`;
	const shared = sharedDigits(lower, upper);
	const places = shared?.split('.')[1]?.length ?? 0;
	return shared !== null && (lower === upper || places >= ENOUGH_PLACES)
		? shared
		: `${lower} … ${upper}`;
}
