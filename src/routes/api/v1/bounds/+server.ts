import { parseBoundsQuery } from '$lib/schemas/bounds-query';
import { publicContext } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { letCache } from '$lib/server/http/cache';
import { listBounds } from '$lib/server/services/bounds/list-bounds';
import type { RequestHandler } from './$types';

/** The public table of the tightest bounds; the query is that of the page. */
export const GET: RequestHandler = endpoint(async (event) => {
	letCache(event);
	const { rows, ...page } = await listBounds(
		publicContext(event),
		parseBoundsQuery(event.url.searchParams)
	);
	return jsonWithEtag(
		event,
		{ items: rows, ...page },
		{ headers: { 'Access-Control-Allow-Origin': '*' } }
	);
});
