import { parseBoundsQuery } from '$lib/schemas/bounds-query';
import { publicContext } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { letCache } from '$lib/server/http/cache';
import { listResponse } from '$lib/server/http/list-response';
import { listBounds } from '$lib/server/services/bounds/list-bounds';
import type { RequestHandler } from './$types';

/** The public table of the tightest bounds; the query is that of the page. */
export const GET: RequestHandler = endpoint(async (event) => {
	letCache(event);
	const query = parseBoundsQuery(event.url.searchParams);
	return listResponse(event, await listBounds(publicContext(event), query), {
		headers: { 'Access-Control-Allow-Origin': '*' }
	});
});
