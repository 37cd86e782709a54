import { contextOf } from '$lib/server/auth/guards';
import { endpoint, textWithEtag } from '$lib/server/http/api';
import { leadOn } from '$lib/server/http/moved';
import { countRequest } from '$lib/server/http/request-limits';
import { inequalitySdpa } from '$lib/server/services/inequalities/inequality-sdpa';
import { movedForCaller } from '$lib/server/services/inequalities/moved-inequality';
import type { RequestHandler } from './$types';

/** A relaxation of an inequality as SDPA text: `?level=1%2BAB&nonNegative=on&sense=min`. */
export const GET: RequestHandler = endpoint(async (event) => {
	await countRequest(event, 'programme');
	const { id } = event.params;
	leadOn(event, id, await movedForCaller(contextOf(event), id));
	const asked = Object.fromEntries(event.url.searchParams);
	const { name, text } = await inequalitySdpa(contextOf(event), id, asked);
	return textWithEtag(event, text, {
		headers: {
			'Content-Type': 'text/plain; charset=utf-8',
			'Content-Disposition': `attachment; filename="${name}"`
		}
	});
});
