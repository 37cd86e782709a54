import { z } from 'zod';
import { VERDICT_STATUSES } from '../ledger/claim';
import { QUANTITIES, type QuantityKey } from '../ledger/quantities';

const LEDGER_SORTS = [
	'newest',
	'oldest',
	'number',
	'value',
	'value-descending',
	'subject',
	'status',
	'reference'
] as const;
export type LedgerSort = (typeof LEDGER_SORTS)[number];

export const PAGE_SIZE = 25;
const LONGEST_SEARCH = 200;

/** State of the ledger's table, all of it in the URL. A part that can't be read takes its default. */
const ledgerQuery = z.object({
	search: z.string().trim().max(LONGEST_SEARCH).catch(''),
	status: z.enum(['all', ...VERDICT_STATUSES]).catch('all'),
	/** As `inequalities.scenario` words it; empty: any. */
	scenario: z.string().max(200).catch(''),
	quantity: z.enum(['', ...QUANTITIES.map((q) => q.key)] as ['', ...QuantityKey[]]).catch(''),
	/** Only those that wait for a maintainer. */
	proposed: z.boolean().catch(false),
	/** Withdrawn and superseded claims are kept but neither listed nor counted unless asked for. */
	withdrawn: z.boolean().catch(false),
	sort: z.enum(LEDGER_SORTS).catch('newest'),
	page: z.coerce.number().int().min(1).max(100_000).catch(1)
});
export type LedgerQuery = z.infer<typeof ledgerQuery>;

export function parseLedgerQuery(parameters: URLSearchParams): LedgerQuery {
	return ledgerQuery.parse({
		search: parameters.get('q') ?? '',
		status: parameters.get('status') ?? 'all',
		scenario: parameters.get('scenario') ?? '',
		quantity: parameters.get('quantity') ?? '',
		proposed: parameters.get('proposed') === '1',
		withdrawn: parameters.get('withdrawn') === '1',
		sort: parameters.get('sort') ?? 'newest',
		page: parameters.get('page') ?? 1
	});
}

/** The query as it stands in the URL, defaults left out. */
export function printLedgerQuery(query: LedgerQuery): URLSearchParams {
	const out = new URLSearchParams();
	if (query.search) out.set('q', query.search);
	if (query.status !== 'all') out.set('status', query.status);
	if (query.scenario) out.set('scenario', query.scenario);
	if (query.quantity) out.set('quantity', query.quantity);
	if (query.proposed) out.set('proposed', '1');
	if (query.withdrawn) out.set('withdrawn', '1');
	if (query.sort !== 'newest') out.set('sort', query.sort);
	if (query.page > 1) out.set('page', String(query.page));
	return out;
}
