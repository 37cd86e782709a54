import type { SortLink } from '$lib/components/sort-link';
import { printLedgerQuery, type LedgerQuery, type LedgerSort } from '../../schemas/ledger-query';

/** The ledger's address with part of its state changed; any change but of the page goes to page 1. */
export function ledgerHref(base: string, query: LedgerQuery, change: Partial<LedgerQuery>): string {
	const search = printLedgerQuery({ ...query, page: 1, ...change }).toString();
	return search ? `${base}?${search}` : base;
}

/** The same for a quantity that is known only as text. */
export function quantityHref(base: string, query: LedgerQuery, quantity: string): string {
	const search = printLedgerQuery({ ...query, page: 1, quantity: '' });
	search.set('quantity', quantity);
	return `${base}?${search}`;
}

/** The sorts a column's heading steps through; after the last it returns to newest first. */
const STEPS: Readonly<
	Record<string, readonly (readonly [LedgerSort, 'ascending' | 'descending'])[]>
> = {
	status: [['status', 'ascending']],
	claim: [['subject', 'ascending']],
	claimed: [
		['value', 'ascending'],
		['value-descending', 'descending']
	],
	reference: [['reference', 'ascending']]
};

/** How a column is sorted and where its heading leads; null for a column that can't be sorted. */
export function sortLink(base: string, query: LedgerQuery, column: string): SortLink | null {
	const steps = STEPS[column];
	if (!steps) return null;
	const at = steps.findIndex(([sort]) => sort === query.sort);
	const next = steps[at + 1];
	return {
		href: ledgerHref(base, query, { sort: next?.[0] ?? 'newest' }),
		direction: steps[at]?.[1] ?? null,
		action: next ? `sort ${next[1]}` : 'sort newest first'
	};
}

/** True when any filter is on, so that no rows means "no match" rather than "nothing yet". */
export function isFiltered(query: LedgerQuery): boolean {
	return Boolean(
		query.search || query.scenario || query.quantity || query.proposed || query.status !== 'all'
	);
}
