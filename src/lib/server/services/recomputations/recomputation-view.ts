import { eq, inArray, or, sql, type SQL } from 'drizzle-orm';
import type { Certificate } from '../../../nonlocality/certificates/types';
import type { RecomputationView } from '../../../schemas/views';
import type { Reader } from '../../db/client';
import { STATIONS, recomputations } from '../../db/schema';
import { exactText, mapSides, showSides, type AffineMap } from '../inequalities/affine';
import { methodDetail, problemLabel } from './problem-label';
import { PROGRESS_COLUMNS, progressView } from './progress-view';

const CERTIFICATES: Readonly<Record<Certificate['kind'], string>> = {
	'deterministic-strategy': 'Deterministic strategy',
	'linear-programme': 'Primal and dual solution',
	'npa-dual': 'Dual multiplier',
	'npa-exact': 'Exact dual multiplier',
	'local-mixture': 'Mixture of strategies and multipliers',
	hybrid: 'Behaviours and multipliers of each bipartition',
	facet: 'Strategies that reach the maximum',
	'quantum-strategy': 'State and measurements',
	enclosure: 'State, measurements and dual multiplier'
};

const certificateLabel = (kind: string | undefined) =>
	Object.entries(CERTIFICATES).find(([known]) => known === kind)?.[1] ?? null;

/** Runs that match, stations first in their order, then by age, in the reader's normalisation. */
export async function recomputationViews(
	read: Reader,
	where: SQL | undefined,
	map: AffineMap,
	now: Date
): Promise<RecomputationView[]> {
	const rows = await read
		.select({
			...PROGRESS_COLUMNS,
			station: recomputations.station,
			problem: recomputations.problem,
			lower: recomputations.lower,
			upper: recomputations.upper,
			exact: recomputations.exact,
			checked: recomputations.checked,
			checkNote: recomputations.checkNote,
			reason: recomputations.reason,
			summary: recomputations.summary
		})
		.from(recomputations)
		.where(where)
		.orderBy(recomputations.createdAt, recomputations.id);
	const order = (station: (typeof rows)[number]['station']) =>
		station === null ? STATIONS.length : STATIONS.indexOf(station);
	return [...rows]
		.sort((a, b) => order(a.station) - order(b.station))
		.map((row): RecomputationView => {
			const sides = mapSides(map, row);
			const shown = showSides(sides);
			return {
				id: row.id,
				label: problemLabel(row.problem),
				detail: row.summary ? methodDetail(row.summary) : '',
				lower: shown.lower,
				upper: shown.upper,
				exact: exactText(sides),
				certificate: certificateLabel(row.summary?.certificate?.kind),
				checked: row.checked,
				checkNote: row.checkNote,
				seconds: row.summary?.seconds ?? null,
				finishedAt: row.finishedAt?.toISOString() ?? null,
				seed: row.summary?.seed ?? null,
				solver: row.summary?.solver ?? null,
				progress: progressView(row, map, now),
				reason: row.reason,
				hasSdpa: row.problem.quantity === 'npa'
			};
		});
}

/** The stations of an inequality and some further runs. */
export function stationsAnd(inequalityId: string | null, ids: readonly string[]): SQL | undefined {
	return or(
		inequalityId === null
			? undefined
			: sql`${recomputations.inequalityId} = ${inequalityId} and ${recomputations.station} is not null`,
		ids.length > 0 ? inArray(recomputations.id, [...ids]) : undefined,
		// Neither: nothing at all, not everything.
		inequalityId === null && ids.length === 0 ? eq(recomputations.id, '') : undefined
	);
}
