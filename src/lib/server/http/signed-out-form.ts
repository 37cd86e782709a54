import type { RequestEvent } from '@sveltejs/kit';

/**
 * A form sent after its session ended. Its action answers with the filled form and a sign-in panel
 * in it; the loads around it then show nothing of the group instead of leading away.
 */
export function isFormSentBySignedOut(event: RequestEvent): boolean {
	return event.locals.actor === null && event.request.method === 'POST';
}
