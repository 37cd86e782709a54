import { and, asc, count, eq, gt, inArray, or, sql, type SQL } from 'drizzle-orm';
import { pageWithin } from '../../../schemas/page-within';
import { BOUNDS_PAGE_SIZE, type BoundsQuery } from '../../../schemas/bounds-query';
import type { BoundsPage, BoundsRow } from '../../../schemas/views';
import type { Context } from '../../context';
import { claims, inequalities, references } from '../../db/schema';
import { statusCounts } from '../claims/list-claims';
import { IDENTITY_TEXT, readMap } from '../inequalities/affine';
import { inequalitySubject, type InequalityRecord } from '../inequalities/inequality-rows';
import {
	loadStations,
	stationSides,
	stationsView,
	type StationRow
} from '../inequalities/stations-view';
import { isPublicClaim } from '../inequalities/visibility';
import { INEQUALITY_TEXT, contains, searchWords } from '../search-words';
import { claimedBounds, type ClaimedBounds } from './claimed-bounds';
import { isClosed, showGap } from './show-gap';

/**
 * The public table: for each inequality with a public claim the tightest published bounds in
 * Agreement beside what was recomputed here, in the representative's normalisation.
 */
export async function listBounds(ctx: Context, query: BoundsQuery): Promise<BoundsPage> {
	const { read } = ctx.db;
	const published = read.select({ id: claims.inequalityId }).from(claims).where(isPublicClaim);
	const where = and(
		inArray(inequalities.id, published),
		query.parties === 'any'
			? undefined
			: query.parties === 'more'
				? gt(inequalities.parties, 3)
				: eq(inequalities.parties, Number(query.parties)),
		query.scenario ? eq(inequalities.scenario, query.scenario) : undefined,
		...searchWords(query.search).map((word) => matches(word, ctx))
	);
	const [counted] = await read.select({ total: count() }).from(inequalities).where(where);
	const total = counted?.total ?? 0;
	const page = pageWithin(query.page, total, BOUNDS_PAGE_SIZE);
	const rows = await read
		.select()
		.from(inequalities)
		.where(where)
		.orderBy(
			asc(inequalities.parties),
			asc(sql`${inequalities.name} is null`),
			asc(inequalities.name),
			asc(inequalities.createdAt)
		)
		.limit(BOUNDS_PAGE_SIZE)
		.offset((page - 1) * BOUNDS_PAGE_SIZE);
	const ids = rows.map(({ id }) => id);
	const stations = await loadStations(read, ids);
	const claimed = await claimedBounds(read, ids);
	const byStatus = await read
		.select({ status: claims.status, count: count() })
		.from(claims)
		.where(and(isPublicClaim, eq(claims.state, 'active')))
		.groupBy(claims.status);
	return {
		rows: rows.map((row) => boundsRow(row, stations.get(row.id) ?? [], claimed.get(row.id))),
		counts: statusCounts(byStatus),
		total,
		page,
		pageSize: BOUNDS_PAGE_SIZE
	};
}

const IDENTITY = readMap(IDENTITY_TEXT);

function boundsRow(
	row: InequalityRecord,
	stations: readonly StationRow[],
	claimed: ClaimedBounds | undefined
): BoundsRow {
	const { lower, upper } = stationSides(stations, IDENTITY).quantum;
	const view = stationsView(stations, IDENTITY);
	const closed = lower !== null && upper !== null && isClosed(lower, upper);
	return {
		inequality: { ...inequalitySubject(row), id: row.id },
		parties: row.parties,
		local: view.local,
		noSignalling: view.noSignalling,
		claimedLower: claimed?.lower ?? null,
		claimedUpper: claimed?.upper ?? null,
		ownLower: view.quantumLower,
		ownUpper: view.quantumUpper,
		gap: lower && upper ? showGap(upper.sub(lower)) : null,
		closed,
		stations: view
	};
}

/** In the inequality itself, or in the paper or the value of a public claim on it. */
function matches(word: string, { db: { read } }: Context): SQL | undefined {
	const cited = sql`${references.formatted} || ' ' || ${references.short} || ' ' || ${claims.printed}`;
	return or(
		contains(INEQUALITY_TEXT, word),
		inArray(
			inequalities.id,
			read
				.select({ id: claims.inequalityId })
				.from(claims)
				.innerJoin(references, eq(references.id, claims.referenceId))
				.where(and(isPublicClaim, contains(cited, word)))
		)
	);
}
