import { config, type Config } from '../config';

const SAFE_METHODS = ['GET', 'HEAD', 'OPTIONS'];

/**
 * Whether a request may change something on behalf of whoever's cookie it carries. SvelteKit's own
 * check looks at form types only and lets JSON and body-less requests from other sites through
 * (and compares with https when ORIGIN is not set), so svelte.config.js turns it off for this one.
 * A browser sends `Sec-Fetch-Site` to secure and local addresses and `Origin` with every unsafe
 * request; one that shows neither is no form or page of ours.
 */
export function mayChangeState(
	request: Request,
	url: URL,
	{ origin, originGiven }: Pick<Config, 'origin' | 'originGiven'> = config()
): boolean {
	if (SAFE_METHODS.includes(request.method)) return true;
	const site = request.headers.get('sec-fetch-site');
	if (site !== null && site !== 'same-origin') return false;
	const from = request.headers.get('origin');
	if (from === null || from === 'null') return site === 'same-origin';
	// Without ORIGIN the address is a guess, and the host the browser asked for decides.
	return from === origin || (!originGiven && hostOf(from) === url.host);
}

/**
 * RFC 8058: a mail program sends this form itself, with no cookie and no origin. The token in the
 * address says who asks, so that there is no cookie's power to misuse.
 */
export const isOneClickRoute = (route: string | null) => route === '/(account)/unsubscribe/[token]';

function hostOf(origin: string): string | null {
	return URL.canParse(origin) ? new URL(origin).host : null;
}
