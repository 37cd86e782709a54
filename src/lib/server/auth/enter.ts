import type { RequestEvent } from '@sveltejs/kit';
import { openedDatabase } from '../application';
import type { SignedIn } from '../services/users/sign-in';
import { setSessionCookie } from './cookie';
import { endSession } from './sessions';

/**
 * Gives the browser the session, and the rest of this request whoever has just signed in: a form
 * that was filled in by someone whose session had ended can go on from here. A session the request
 * came with ends, since its cookie is replaced.
 */
export async function enter(
	event: RequestEvent,
	{ actor, sessionId, token }: SignedIn
): Promise<void> {
	const before = event.locals.sessionId;
	if (before) await endSession(openedDatabase(), before);
	setSessionCookie(event.cookies, token);
	event.locals.actor = actor;
	event.locals.sessionId = sessionId;
}
