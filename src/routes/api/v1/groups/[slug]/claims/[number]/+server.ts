import { requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { claimNumber } from '$lib/server/http/route-numbers';
import { showClaim } from '$lib/server/services/claims/show-claim';
import type { RequestHandler } from './$types';

/** One claim with its verdict, recomputations, reference and history. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	return jsonWithEtag(event, await showClaim(ctx, claimNumber(event.params.number)));
});
