import { redirect, type RequestEvent } from '@sveltejs/kit';

/**
 * Leads an old address on, its query with it, where what stood there has moved; for good, since ids
 * are never given again.
 */
export function leadOn(event: Pick<RequestEvent, 'url'>, from: string, to: string | null): void {
	if (to === null || to === from) return;
	const { pathname, search } = event.url;
	redirect(308, pathname.replace(encodeURIComponent(from), to) + search);
}
