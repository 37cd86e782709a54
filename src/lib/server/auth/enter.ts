import type { RequestEvent } from '@sveltejs/kit';
import type { SignedIn } from '../services/users/sign-in';
import { setSessionCookie } from './cookie';

/**
 * Gives the browser the session, and the rest of this request whoever has just signed in: a form
 * that was filled in by someone whose session had ended can go on from here. A session the request
 * came with is left to end by itself.
 */
export function enter(event: RequestEvent, { actor, sessionId, token }: SignedIn): void {
	setSessionCookie(event.cookies, token);
	event.locals.actor = actor;
	event.locals.sessionId = sessionId;
}
