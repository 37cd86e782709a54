import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { claimNumber } from '$lib/server/http/route-numbers';
import { tasksOfClaim } from '$lib/server/services/tasks/tasks-of-claim';
import type { RequestHandler } from './$types';

/** All tasks of a claim, those under way first. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	const items = await tasksOfClaim(ctx, claimNumber(event.params.number));
	return jsonWithEtag(event, { items });
});
