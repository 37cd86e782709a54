import type { Cookies } from '@sveltejs/kit';
import { config } from '../config';
import { SESSION_LIMITS } from './lucia';

/** Over plain http a browser refuses the `__Host-` prefix and Secure; the start warns about it. */
export function sessionCookieName(): string {
	return config().secure ? '__Host-merestone' : 'merestone';
}

export function setSessionCookie(cookies: Cookies, token: string): void {
	cookies.set(sessionCookieName(), token, {
		path: '/',
		httpOnly: true,
		secure: config().secure,
		sameSite: 'lax',
		maxAge: SESSION_LIMITS.absoluteDays * 86_400
	});
}

export function clearSessionCookie(cookies: Cookies): void {
	cookies.delete(sessionCookieName(), { path: '/', httpOnly: true, secure: config().secure });
}
