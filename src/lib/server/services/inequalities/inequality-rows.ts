import { and, count, eq, inArray, ne, type SQL } from 'drizzle-orm';
import type { InequalityRow } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { claims, inequalities } from '../../db/schema';
import { IDENTITY_TEXT, readMap } from './affine';
import { loadStations, stationsView } from './stations-view';
import { subjectView } from './subject-view';

export type InequalityRecord = typeof inequalities.$inferSelect;

export function inequalitySubject(row: InequalityRecord) {
	return subjectView({
		inequalityId: row.id,
		name: row.name,
		nameLatex: row.nameLatex,
		text: row.name ?? row.latex,
		latex: row.latex || null,
		scenario: row.scenario
	});
}

/** Rows in the order given, values in the normalisation of each representative. */
export async function inequalityRows(
	read: Reader,
	rows: readonly InequalityRecord[],
	/** Which claims are counted. */
	visible: SQL | undefined
): Promise<InequalityRow[]> {
	if (rows.length === 0) return [];
	const ids = rows.map(({ id }) => id);
	const stations = await loadStations(read, ids);
	const counted = await read
		.select({ id: claims.inequalityId, claims: count() })
		.from(claims)
		.where(and(inArray(claims.inequalityId, ids), ne(claims.state, 'withdrawn'), visible))
		.groupBy(claims.inequalityId);
	const identity = readMap(IDENTITY_TEXT);
	return rows.map((row) => ({
		id: row.id,
		subject: inequalitySubject(row),
		parties: row.parties,
		stations: stationsView(stations.get(row.id) ?? [], identity),
		claims: counted.find(({ id }) => id === row.id)?.claims ?? 0
	}));
}

export async function findInequality(read: Reader, id: string): Promise<InequalityRecord | null> {
	const [row] = await read.select().from(inequalities).where(eq(inequalities.id, id));
	return row ?? null;
}
