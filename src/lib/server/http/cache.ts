import type { RequestEvent } from '@sveltejs/kit';

/** Seconds a public page may be stale; a browser may show it a while longer while it asks again. */
const FRESH_SECONDS = 60;

/** Marks an answer as the same for everyone; security-headers.ts takes it back for the signed-in. */
export function letCache(event: Pick<RequestEvent, 'setHeaders'>): void {
	event.setHeaders({
		'Cache-Control': `public, max-age=${FRESH_SECONDS}, stale-while-revalidate=300`
	});
}
