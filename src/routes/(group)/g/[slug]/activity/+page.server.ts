import { parseActivityQuery } from '$lib/schemas/activity-query';
import { requireRole } from '$lib/server/auth/guards';
import { listActivity } from '$lib/server/services/activity/list-activity';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseActivityQuery(event.url.searchParams);
	return { query, activity: await listActivity(ctx, query) };
};
