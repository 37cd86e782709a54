import { publicContext } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { letCache } from '$lib/server/http/cache';
import { showPublicClaim } from '$lib/server/services/claims/show-public-claim';
import type { RequestHandler } from './$types';

/** A public claim. */
export const GET: RequestHandler = endpoint(async (event) => {
	const claim = await showPublicClaim(publicContext(event), event.params.id);
	letCache(event);
	return jsonWithEtag(event, claim, { headers: { 'Access-Control-Allow-Origin': '*' } });
});
