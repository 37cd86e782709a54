import { and, inArray, sql } from 'drizzle-orm';
import { isAlmostQuantum } from '../../../ledger/problem-labels';
import type { Rational } from '../../../nonlocality/exact/rational';
import type { Level, Problem } from '../../../nonlocality/problem';
import type { StationsView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { recomputations, type Station } from '../../db/schema';
import { loadEarlier } from '../recomputations/earlier-results';
import { isSharedRun } from '../recomputations/shared-run';
import {
	mapSides,
	showFigure,
	showSides,
	type AffineMap,
	type MappedSides,
	type Sides
} from './affine';

export interface StationRow extends Sides {
	readonly id: string;
	readonly inequalityId: string | null;
	/** Null for a run that only a claim asked for. */
	readonly station: Station | null;
	readonly quantity: Problem['quantity'];
	readonly level: Level | null;
	readonly state: (typeof recomputations.$inferSelect)['state'];
	/** Run again for a newer solver only: what it proved stands meanwhile. */
	readonly renewal: boolean;
	readonly checked: boolean | null;
}

/**
 * The stations of some inequalities without their (large) results, by inequality; with them every
 * other checked run of a plain maximum. Who asked for a run plays no part: what it proves is a
 * fact about the inequality, and nothing of the claim is read here.
 */
export async function loadStations(
	reader: Reader,
	inequalityIds: readonly string[]
): Promise<Map<string, StationRow[]>> {
	const byInequality = new Map<string, StationRow[]>();
	if (inequalityIds.length === 0) return byInequality;
	const rows = await reader
		.select({
			id: recomputations.id,
			inequalityId: recomputations.inequalityId,
			station: recomputations.station,
			quantity: sql<Problem['quantity']>`json_extract(${recomputations.problem}, '$.quantity')`,
			level: sql<string | null>`${recomputations.problem} -> '$.level'`,
			state: recomputations.state,
			renewal: recomputations.renewal,
			checked: recomputations.checked,
			lower: recomputations.lower,
			upper: recomputations.upper,
			exact: recomputations.exact
		})
		.from(recomputations)
		.where(and(inArray(recomputations.inequalityId, [...new Set(inequalityIds)]), isSharedRun));
	for (const { level, ...row } of rows) {
		const key = row.inequalityId ?? '';
		const read = level === null ? null : (JSON.parse(level) as Level);
		byInequality.set(key, [...(byInequality.get(key) ?? []), { ...row, level: read }]);
	}
	await addEarlier(reader, byInequality);
	return byInequality;
}

/** What those runs had proved before a newer solver ran them again. */
async function addEarlier(reader: Reader, found: Map<string, StationRow[]>): Promise<void> {
	const runs = [...found.values()].flat();
	const earlier = await loadEarlier(
		reader,
		runs.map(({ id }) => id)
	);
	for (const { recomputationId, lower, upper, exact } of earlier) {
		const run = runs.find(({ id }) => id === recomputationId);
		if (run)
			found.get(run.inequalityId ?? '')?.push({ ...run, lower, upper, exact, checked: true });
	}
}

/** The larger of two bounds, of which one may not be known. */
const larger = (a: Rational | null, b: Rational | null) =>
	!a ? b : !b ? a : a.compare(b) >= 0 ? a : b;
const smaller = (a: Rational | null, b: Rational | null) =>
	!a ? b : !b ? a : a.compare(b) <= 0 ? a : b;

const UNKNOWN: MappedSides = { lower: null, upper: null };

/** Runs whose value no quantum strategy falls short of, and those whose value none exceeds. */
const BELOW_QUANTUM: readonly Problem['quantity'][] = ['quantum', 'see-saw', 'local'];
const ABOVE_QUANTUM: readonly Problem['quantity'][] = ['quantum', 'npa', 'no-signalling'];

/**
 * The best that all checked runs together prove about each set, mapped to a normalisation;
 * unchecked ones prove nothing.
 */
export function stationSides(rows: readonly StationRow[], map: AffineMap) {
	const checked = rows.filter((row) => row.checked);
	const best = (
		below: (row: StationRow) => boolean,
		above: (row: StationRow) => boolean
	): MappedSides => ({
		lower: checked.filter(below).reduce(largerOf, UNKNOWN.lower),
		upper: checked.filter(above).reduce(smallerOf, UNKNOWN.upper)
	});
	const largerOf = (found: Rational | null, row: StationRow) =>
		larger(found, mapSides(map, row).lower);
	const smallerOf = (found: Rational | null, row: StationRow) =>
		smaller(found, mapSides(map, row).upper);
	const set = (is: (row: StationRow) => boolean) => best(is, is);
	return {
		local: set(({ quantity }) => quantity === 'local'),
		noSignalling: set(({ quantity }) => quantity === 'no-signalling'),
		almostQuantum: set(({ level }) => level !== null && isAlmostQuantum(level)),
		quantum: best(
			({ quantity }) => BELOW_QUANTUM.includes(quantity),
			({ quantity }) => ABOVE_QUANTUM.includes(quantity)
		)
	};
}

export function stationsView(rows: readonly StationRow[], map: AffineMap): StationsView {
	const { local, noSignalling, almostQuantum, quantum } = stationSides(rows, map);
	const shown = showSides(quantum);
	return {
		local: local.lower && showFigure(local.lower, 'lower'),
		quantumLower: shown.lower,
		quantumUpper: shown.upper,
		almostQuantum: showSides(almostQuantum).upper,
		noSignalling: noSignalling.upper && showFigure(noSignalling.upper, 'upper'),
		complete: rows.some(({ station }) => station !== null) && stationsDone(rows)
	};
}

/** What claims asked for beside the stations does not keep them from being done. */
export function stationsDone(
	rows: readonly (Pick<StationRow, 'state' | 'renewal'> & {
		readonly station?: Station | null;
	})[]
): boolean {
	return rows.every(
		({ state, station, renewal }) =>
			station === null || renewal || (state !== 'queued' && state !== 'running')
	);
}
