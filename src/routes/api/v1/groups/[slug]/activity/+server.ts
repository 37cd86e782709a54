import { parseActivityQuery } from '$lib/schemas/activity-query';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { listResponse } from '$lib/server/http/list-response';
import { listActivity } from '$lib/server/services/activity/list-activity';
import type { RequestHandler } from './$types';

/** The group's activity with the query of the page; what changed in it is for maintainers. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseActivityQuery(event.url.searchParams);
	const { entries, ...page } = await listActivity(ctx, query);
	return listResponse(event, { rows: entries, ...page });
});
