import { contextOf } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { sdpaText } from '$lib/server/services/recomputations/sdpa-text';
import type { RequestHandler } from './$types';

/** The semidefinite programme in the SDPA sparse format. */
export const GET: RequestHandler = endpoint(async (event) => {
	const text = await sdpaText(contextOf(event), event.params.id);
	return new Response(text, {
		headers: {
			'Content-Type': 'text/plain; charset=utf-8',
			'Content-Disposition': `attachment; filename="merestone-${event.params.id}.dat-s"`
		}
	});
});
