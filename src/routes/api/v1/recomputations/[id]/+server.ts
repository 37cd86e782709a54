import { contextOf, requireRole } from '$lib/server/auth/guards';
import { endpoint, jsonWithEtag } from '$lib/server/http/api';
import { cancelRecomputation } from '$lib/server/services/recomputations/cancel-recomputation';
import { showRecomputation } from '$lib/server/services/recomputations/show-recomputation';
import type { RequestHandler } from './$types';

/** A recomputation in the normalisation of its own problem; the service decides who sees it. */
export const GET: RequestHandler = endpoint(async (event) =>
	jsonWithEtag(event, await showRecomputation(contextOf(event), event.params.id))
);

/** Cancels it on behalf of a group whose claim asked for it: `?group=SLUG`. */
export const DELETE: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'member', event.url.searchParams.get('group') ?? '');
	await cancelRecomputation(ctx, event.params.id);
	return new Response(null, { status: 204 });
});
