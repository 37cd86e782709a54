import type { BoundsQuery } from '../../schemas/bounds-query';

/** The front page's address with part of its state changed. */
export function boundsHref(query: BoundsQuery, change: Partial<BoundsQuery>): string {
	const next = { ...query, page: 1, ...change };
	const search = new URLSearchParams();
	if (next.search) search.set('q', next.search);
	if (next.parties !== 'any') search.set('parties', next.parties);
	if (next.scenario) search.set('scenario', next.scenario);
	if (next.page > 1) search.set('page', String(next.page));
	return search.size > 0 ? `/?${search}` : '/';
}

/** Search parameters that a search keeps. */
export function keptByBoundsSearch(query: BoundsQuery): [string, string][] {
	return [
		...(query.parties === 'any' ? [] : [['parties', query.parties] as [string, string]]),
		...(query.scenario ? [['scenario', query.scenario] as [string, string]] : [])
	];
}
