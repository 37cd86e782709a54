import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { taskNumber } from '$lib/server/http/route-numbers';
import { showTask } from '$lib/server/services/tasks/show-task';
import type { RequestHandler } from './$types';

/** One task with what was submitted, and what the caller may do with it. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	return jsonWithEtag(event, await showTask(ctx, taskNumber(event.params.number)));
});
