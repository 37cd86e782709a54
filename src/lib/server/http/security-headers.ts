import type { RequestEvent } from '@sveltejs/kit';
import { config } from '../config';
import { STRICT_TRANSPORT } from './every-answer';
import { isOneClickRoute } from './same-origin';

const ALWAYS = {
	'X-Content-Type-Options': 'nosniff',
	// Not no-referrer: with it browsers send `Origin: null` from our own forms.
	'Referrer-Policy': 'same-origin',
	'Cross-Origin-Opener-Policy': 'same-origin',
	'Cross-Origin-Resource-Policy': 'same-origin',
	'Permissions-Policy': 'camera=(), microphone=(), geolocation=(), payment=(), usb=()'
} as const;

/** Headers of every answer that passes the hook; pages get their policy for scripts from SvelteKit. */
export function setSecurityHeaders(event: RequestEvent, response: Response): void {
	const { headers } = response;
	for (const [name, value] of Object.entries(ALWAYS)) headers.set(name, value);
	// The address of such a page is a secret of the mail it stood in.
	if (isOneClickRoute(event.route.id)) headers.set('Referrer-Policy', 'no-referrer');
	if (config().secure) {
		headers.set('Strict-Transport-Security', STRICT_TRANSPORT);
	}
	if (!headers.has('Content-Security-Policy')) {
		headers.set('Content-Security-Policy', "default-src 'none'; frame-ancestors 'none'");
	}
	headers.set('X-Request-Id', event.locals.requestId);
	setCaching(event, response);
}

/**
 * Only what a page or endpoint for everyone marked as such may be kept, and only when nobody in
 * particular asked: the same page shows a person's name and groups once they have signed in.
 */
function setCaching(event: RequestEvent, { headers, status }: Response): void {
	const shared = headers.get('Cache-Control')?.includes('public') ?? false;
	if (shared && !event.locals.actor && status < 400 && !headers.has('Set-Cookie')) {
		headers.append('Vary', 'Cookie');
	} else {
		headers.set('Cache-Control', 'private, no-store');
	}
}
