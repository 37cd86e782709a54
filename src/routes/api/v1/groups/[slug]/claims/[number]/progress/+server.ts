import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { claimNumber } from '$lib/server/http/route-numbers';
import { claimProgress } from '$lib/server/services/claims/claim-progress';
import type { RequestHandler } from './$types';

/** How a claim stands while it is recomputed; for where events do not get through. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	return jsonWithEtag(event, await claimProgress(ctx, claimNumber(event.params.number)));
});
