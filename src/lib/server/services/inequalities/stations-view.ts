import { and, inArray, isNotNull } from 'drizzle-orm';
import { showBound } from '../../../ledger/figures';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { StationsView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { recomputations, type Station } from '../../db/schema';
import { mapSides, showSides, type AffineMap, type MappedSides, type Sides } from './affine';

export interface StationRow extends Sides {
	readonly id: string;
	readonly inequalityId: string | null;
	readonly station: Station | null;
	readonly state: (typeof recomputations.$inferSelect)['state'];
	readonly checked: boolean | null;
}

/** The stations of some inequalities without their (large) results, by inequality. */
export async function loadStations(
	read: Reader,
	inequalityIds: readonly string[]
): Promise<Map<string, StationRow[]>> {
	const byInequality = new Map<string, StationRow[]>();
	if (inequalityIds.length === 0) return byInequality;
	const rows = await read
		.select({
			id: recomputations.id,
			inequalityId: recomputations.inequalityId,
			station: recomputations.station,
			state: recomputations.state,
			checked: recomputations.checked,
			lower: recomputations.lower,
			upper: recomputations.upper,
			exact: recomputations.exact
		})
		.from(recomputations)
		.where(
			and(
				inArray(recomputations.inequalityId, [...new Set(inequalityIds)]),
				isNotNull(recomputations.station)
			)
		);
	for (const row of rows) {
		const key = row.inequalityId ?? '';
		byInequality.set(key, [...(byInequality.get(key) ?? []), row]);
	}
	return byInequality;
}

/** The larger of two bounds, of which one may not be known. */
export const larger = (a: Rational | null, b: Rational | null) =>
	!a ? b : !b ? a : a.compare(b) >= 0 ? a : b;
export const smaller = (a: Rational | null, b: Rational | null) =>
	!a ? b : !b ? a : a.compare(b) <= 0 ? a : b;

const UNKNOWN: MappedSides = { lower: null, upper: null };

/** What the stations prove about each set, mapped to a normalisation; unchecked ones prove nothing. */
export function stationSides(rows: readonly StationRow[], map: AffineMap) {
	const of = (station: Station): MappedSides => {
		const row = rows.find((candidate) => candidate.station === station && candidate.checked);
		return row ? mapSides(map, row) : UNKNOWN;
	};
	const relaxations = (['npa-1', 'npa-1-non-negative', 'almost-quantum', 'npa-2'] as const).map(of);
	const quantum = of('quantum');
	const local = of('local');
	return {
		local,
		noSignalling: of('no-signalling'),
		almostQuantum: of('almost-quantum'),
		quantum: {
			lower: [of('see-saw-2').lower, local.lower].reduce(larger, quantum.lower),
			upper: relaxations.reduce((best, { upper }) => smaller(best, upper), quantum.upper)
		}
	};
}

export function stationsView(rows: readonly StationRow[], map: AffineMap): StationsView {
	const { local, noSignalling, almostQuantum, quantum } = stationSides(rows, map);
	const shown = showSides(quantum);
	return {
		local: local.lower && showBound(local.lower, 'lower'),
		quantumLower: shown.lower,
		quantumUpper: shown.upper,
		almostQuantum: showSides(almostQuantum).upper,
		noSignalling: noSignalling.upper && showBound(noSignalling.upper, 'upper'),
		complete: rows.length > 0 && stationsDone(rows)
	};
}

export function stationsDone(rows: readonly Pick<StationRow, 'state'>[]): boolean {
	return rows.every(({ state }) => state !== 'queued' && state !== 'running');
}
