import { parseTaskQuery } from '$lib/schemas/task-input';
import { requireRole } from '$lib/server/auth/guards';
import { answering } from '$lib/server/http/page-errors';
import { listFeeds } from '$lib/server/services/calendar/list-feeds';
import { listTasks } from '$lib/server/services/tasks/list-tasks';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseTaskQuery(event.url.searchParams);
	const tasks = await answering(() => listTasks(ctx, query));
	const feeds = await listFeeds(ctx, { groupSlug: ctx.group.slug });
	return { query, tasks, feeds, role: ctx.role, self: ctx.actor.id };
};
