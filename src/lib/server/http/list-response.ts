import type { RequestEvent } from '@sveltejs/kit';
import { jsonWithEtag, type JsonAnswer } from './api';

interface Page<T> {
	readonly rows: readonly T[];
	readonly page: number;
	readonly pageSize: number;
	readonly total: number;
}

/**
 * One page of a list: its rows as `items`, what counts them beside, and a `Link` header
 * (RFC 8288) to the first, previous, next and last page of the same query.
 */
export function listResponse<T, P extends Page<T>>(
	event: RequestEvent,
	{ rows, ...page }: P,
	answer: JsonAnswer = {}
): Response {
	return jsonWithEtag(
		event,
		{ items: rows, ...page },
		{ ...answer, headers: { ...answer.headers, Link: pageLinks(event.url, page) } }
	);
}

export function pageLinks(url: URL, { page, pageSize, total }: Omit<Page<never>, 'rows'>): string {
	const last = Math.max(1, Math.ceil(total / pageSize));
	const link = (rel: string, number: number) => {
		const search = new URLSearchParams(url.searchParams);
		search.set('page', String(number));
		return `<${url.pathname}?${search.toString()}>; rel="${rel}"`;
	};
	return [
		link('first', 1),
		...(page > 1 ? [link('prev', Math.min(page - 1, last))] : []),
		...(page < last ? [link('next', page + 1)] : []),
		link('last', last)
	].join(', ');
}
