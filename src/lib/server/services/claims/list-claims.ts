import { and, asc, count, desc, eq, or, sql, type SQL } from 'drizzle-orm';
import { VERDICT_STATUSES } from '../../../ledger/claim';
import { QUANTITIES } from '../../../ledger/quantities';
import { pageWithin } from '../../../schemas/page-within';
import { PAGE_SIZE, type LedgerQuery, type LedgerSort } from '../../../schemas/ledger-query';
import type { LedgerPage, StatusCounts } from '../../../schemas/views';
import type { GroupContext } from '../../context';
import { claims, inequalities, references } from '../../db/schema';
import { contains, searchWords } from '../search-words';
import { claimRows, selectClaimRows } from './claim-rows';

/** One page of a group's ledger: searched, filtered, sorted and counted by the database. */
export async function listClaims(ctx: GroupContext, query: LedgerQuery): Promise<LedgerPage> {
	const { read } = ctx.db;
	const base = and(
		eq(claims.groupId, ctx.group.id),
		query.withdrawn ? undefined : eq(claims.state, 'active')
	);
	const filters = {
		search: query.search ? matches(query.search) : undefined,
		status: query.status === 'all' ? undefined : eq(claims.status, query.status),
		scenario: query.scenario ? eq(inequalities.scenario, query.scenario) : undefined,
		quantity: query.quantity ? eq(claims.quantity, query.quantity) : undefined,
		proposed: query.proposed ? eq(claims.visibility, 'proposed') : undefined
	};
	const { search, status, scenario, quantity, proposed } = filters;
	const byStatus = await read
		.select({ status: claims.status, count: count() })
		.from(claims)
		.innerJoin(references, eq(references.id, claims.referenceId))
		.leftJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.where(and(base, search, scenario, quantity, proposed))
		.groupBy(claims.status);
	const counts = statusCounts(byStatus);
	const total = query.status === 'all' ? counts.all : counts[query.status];
	const page = pageWithin(query.page, total, PAGE_SIZE);
	const selected = await selectClaimRows(
		read,
		and(base, search, status, scenario, quantity, proposed)
	)
		.orderBy(...order(query.sort))
		.limit(PAGE_SIZE)
		.offset((page - 1) * PAGE_SIZE);
	const [papers] = await read
		.select({ papers: sql<number>`count(distinct ${claims.referenceId})` })
		.from(claims)
		.where(base);
	const [waiting] = await read
		.select({ proposed: count() })
		.from(claims)
		.where(and(base, eq(claims.visibility, 'proposed')));
	const scenarios = await read
		.select({ value: inequalities.scenario, count: count() })
		.from(claims)
		.innerJoin(inequalities, eq(inequalities.id, claims.inequalityId))
		.where(base)
		.groupBy(inequalities.scenario)
		.orderBy(desc(count()), asc(inequalities.scenario));
	const quantities = await read
		.select({ value: claims.quantity, count: count() })
		.from(claims)
		.where(base)
		.groupBy(claims.quantity)
		.orderBy(desc(count()), asc(claims.quantity));
	return {
		rows: await claimRows(read, selected, ctx.now(), [ctx.group.id]),
		total,
		counts,
		page,
		pageSize: PAGE_SIZE,
		papers: papers?.papers ?? 0,
		proposed: waiting?.proposed ?? 0,
		scenarios,
		quantities: quantities.map((row) => ({
			...row,
			label: QUANTITIES.find(({ key }) => key === row.value)?.label ?? row.value
		}))
	};
}

export function statusCounts(
	rows: readonly { readonly status: (typeof VERDICT_STATUSES)[number]; readonly count: number }[]
): StatusCounts {
	const of = (status: string) => rows.find((row) => row.status === status)?.count ?? 0;
	const [agreement, discrepancy, open] = [of('agreement'), of('discrepancy'), of('open')];
	return { agreement, discrepancy, open, all: agreement + discrepancy + open };
}

/** Each word must occur somewhere in what the row shows. */
function matches(search: string): SQL | undefined {
	return and(
		...searchWords(search).map((word) => {
			const number = /^#?(\d{1,9})$/.exec(word)?.[1];
			return or(
				contains(inequalities.name, word),
				contains(claims.subject, word),
				contains(claims.quantityLabel, word),
				contains(claims.printed, word),
				contains(claims.locator, word),
				contains(claims.method, word),
				contains(references.formatted, word),
				contains(references.short, word),
				contains(references.doi, word),
				number ? eq(claims.number, Number(number)) : undefined
			);
		})
	);
}

const ORDERS: Record<LedgerSort, () => SQL[]> = {
	newest: () => [desc(claims.createdAt)],
	oldest: () => [asc(claims.createdAt)],
	number: () => [],
	value: () => [asc(claims.sortValue)],
	'value-descending': () => [desc(claims.sortValue)],
	subject: () => [asc(sql`coalesce(${inequalities.name}, ${claims.subject}) collate nocase`)],
	status: () => [
		asc(sql`case ${claims.status} when 'discrepancy' then 0 when 'open' then 1 else 2 end`)
	],
	reference: () => [asc(sql`${references.short} collate nocase`)]
};

/** Ties go by number, so that pages never overlap. */
function order(sort: LedgerSort): SQL[] {
	return [...ORDERS[sort](), sort === 'newest' ? desc(claims.number) : asc(claims.number)];
}
