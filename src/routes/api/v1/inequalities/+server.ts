import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { searchInequalities } from '$lib/server/services/inequalities/search-inequalities';
import type { RequestHandler } from './$types';

/** Known inequalities a group may pick from: `?group=SLUG&q=TEXT`. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer', event.url.searchParams.get('group') ?? '');
	const items = await searchInequalities(ctx, event.url.searchParams.get('q') ?? '');
	return jsonWithEtag(event, { items });
});
