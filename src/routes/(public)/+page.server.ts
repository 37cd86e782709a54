import { listBounds } from '$lib/server/services/bounds/list-bounds';
import { parseBoundsQuery } from '$lib/schemas/bounds-query';
import { publicContext } from '$lib/server/auth/guards';
import { letCache } from '$lib/server/http/cache';
import { answering } from '$lib/server/http/page-errors';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const query = parseBoundsQuery(event.url.searchParams);
	const bounds = await answering(() => listBounds(publicContext(event), query));
	letCache(event);
	return { query, bounds };
};
