import { requireUser } from '$lib/server/auth/guards';
import { endpoint } from '$lib/server/http/api';
import { listResponse } from '$lib/server/http/list-response';
import { listNews } from '$lib/server/services/notifications/list-news';
import type { RequestHandler } from './$types';

/** What is new for the caller, newest first: `?page=2`. Reading it marks nothing as read. */
export const GET: RequestHandler = endpoint(async (event) => {
	const ctx = requireUser(event);
	const page = Number(event.url.searchParams.get('page') ?? 1);
	const { items, ...news } = await listNews(ctx, page);
	return listResponse(event, { rows: items, ...news });
});
