import { parseTaskQuery } from '$lib/schemas/task-input';
import { requireRole } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { listResponse } from '$lib/server/http/list-response';
import { listTasks } from '$lib/server/services/tasks/list-tasks';
import type { RequestHandler } from './$types';

/** The group's tasks with the query of the page. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	const query = parseTaskQuery(event.url.searchParams);
	return listResponse(event, await listTasks(ctx, { ...query, view: 'table' }));
});
