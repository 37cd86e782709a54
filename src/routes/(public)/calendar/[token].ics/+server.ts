import { publicContext } from '$lib/server/auth/guards';
import { textWithEtag } from '$lib/server/http/api';
import { problemOf } from '$lib/server/http/problem';
import { countRequest } from '$lib/server/http/request-limits';
import { readFeed } from '$lib/server/services/calendar/read-feed';
import type { RequestHandler } from './$types';

/** Due dates for a calendar program, which knows the secret address and nothing else. */
export const GET: RequestHandler = async (event) => {
	try {
		await countRequest(event, 'calendar');
		const text = await readFeed(publicContext(event), event.params.token);
		return textWithEtag(event, text, {
			headers: {
				'Content-Type': 'text/calendar; charset=utf-8',
				'Content-Disposition': 'inline; filename="merestone.ics"'
			}
		});
	} catch (thrown) {
		return problemOf(thrown);
	}
};
