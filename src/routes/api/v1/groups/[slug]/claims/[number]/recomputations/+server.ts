import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonResponse } from '$lib/server/http/api';
import { countRequest } from '$lib/server/http/request-limits';
import { claimNumber } from '$lib/server/http/route-numbers';
import { claimProgress } from '$lib/server/services/claims/claim-progress';
import { recomputeClaim } from '$lib/server/services/claims/recompute-claim';
import type { RequestHandler } from './$types';

/** Queues the claim's recomputation again. */
export const POST: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'member');
	const number = claimNumber(event.params.number);
	await countRequest(event, 'change');
	await recomputeClaim(ctx, number);
	return jsonResponse(await claimProgress(ctx, number), { status: 202 });
});
