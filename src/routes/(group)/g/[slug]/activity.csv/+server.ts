import { activityCsv } from '$lib/features/activity/activity-csv';
import { parseActivityQuery } from '$lib/schemas/activity-query';
import type { ActivityEntry } from '$lib/schemas/talk-views';
import { requireRole } from '$lib/server/auth/guards';
import { listActivity } from '$lib/server/services/activity/list-activity';
import type { RequestHandler } from './$types';

/** Pages of the activity that one file may hold. */
const MOST_PAGES = 400;

/** All entries that the filters leave, not only those of one page. */
export const GET: RequestHandler = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseActivityQuery(event.url.searchParams);
	const entries: ActivityEntry[] = [];
	for (let page = 1; page <= MOST_PAGES; page++) {
		const part = await listActivity(ctx, { ...query, page });
		entries.push(...part.entries);
		if (part.page < page || part.entries.length === 0 || entries.length >= part.total) break;
	}
	return new Response(activityCsv(entries, event.url.origin), {
		headers: {
			'Content-Type': 'text/csv; charset=utf-8',
			'Content-Disposition': `attachment; filename="${ctx.group.slug}-activity.csv"`
		}
	});
};
