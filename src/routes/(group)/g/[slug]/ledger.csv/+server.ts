import { ledgerCsv } from '$lib/features/ledger/ledger-csv';
import { parseLedgerQuery } from '$lib/schemas/ledger-query';
import type { LedgerRow } from '$lib/schemas/views';
import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { listClaims } from '$lib/server/services/claims/list-claims';
import type { RequestHandler } from './$types';

/** Pages of the ledger that one file may hold. */
const MOST_PAGES = 400;

/** All rows that the ledger's filters leave, not only those of one page. */
export const GET: RequestHandler = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseLedgerQuery(event.url.searchParams);
	const rows: LedgerRow[] = [];
	for (let page = 1; page <= MOST_PAGES; page++) {
		const part = await answering(() => listClaims(ctx, { ...query, page }));
		rows.push(...part.rows);
		if (part.rows.length === 0 || rows.length >= part.total) break;
	}
	return new Response(ledgerCsv(rows), {
		headers: {
			'Content-Type': 'text/csv; charset=utf-8',
			'Content-Disposition': `attachment; filename="${ctx.group.slug}-ledger.csv"`
		}
	});
};
