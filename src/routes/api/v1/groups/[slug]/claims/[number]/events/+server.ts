import { requireRole } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { eventStream } from '$lib/server/http/event-stream';
import { claimNumber } from '$lib/server/http/route-numbers';
import { claimProgress } from '$lib/server/services/claims/claim-progress';
import type { RequestHandler } from './$types';

/** Server-sent `progress` events with the same data as ../progress, until nothing runs any more. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = await requireRole(event, 'observer');
	const number = claimNumber(event.params.number);
	// Asked once before the stream opens, so that a claim that is not there is a 404.
	const first = await claimProgress(ctx, number);
	return eventStream(event.request.signal, 'progress', first, async () => {
		const view = await claimProgress(ctx, number);
		return { data: view, last: view.settled };
	});
});
