import type { RequestEvent } from '@sveltejs/kit';
import { openedDatabase } from '../application';
import { newId } from '../ids';
import { clearSessionCookie, sessionCookieName } from './cookie';
import { validateToken } from './sessions';

/** Fills `locals`: the request's id, and who sent it according to the session cookie. */
export async function identify(event: RequestEvent): Promise<void> {
	event.locals.requestId = newId();
	event.locals.actor = null;
	event.locals.sessionId = null;
	const token = event.cookies.get(sessionCookieName());
	if (!token) return;
	const valid = await validateToken(openedDatabase(), token);
	if (valid) {
		event.locals.actor = valid.actor;
		event.locals.sessionId = valid.sessionId;
	} else {
		clearSessionCookie(event.cookies);
	}
}
