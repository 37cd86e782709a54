import type { Handle, HandleServerError, ServerInit } from '@sveltejs/kit';
import { identify } from '$lib/server/auth/session-hook';
import { asProblem } from '$lib/server/http/api';
import { refuseBody } from '$lib/server/http/body-limit';
import { guardForms } from '$lib/server/http/guard-forms';
import { pageShell } from '$lib/server/http/page-shell';
import { problemResponse } from '$lib/server/http/problem';
import { isOneClickRoute, mayChangeState } from '$lib/server/http/same-origin';
import { setSecurityHeaders } from '$lib/server/http/security-headers';
import { newId } from '$lib/server/ids';
import { log, securityEvent } from '$lib/server/log';
import { startServer } from '$lib/server/start';

export const init: ServerInit = startServer;

export const handle: Handle = async ({ event, resolve }) => {
	await identify(event);
	guardForms(event);
	const allowed = isOneClickRoute(event.route.id) || mayChangeState(event.request, event.url);
	const response = allowed
		? asProblem(event, (await refuseBody(event)) ?? (await resolve(event, pageShell)))
		: refuse(event.route.id, event.locals.requestId);
	setSecurityHeaders(event, response);
	return response;
};

function refuse(route: string | null, request: string): Response {
	securityEvent('cross-site', { route, request });
	return problemResponse({ status: 403, detail: 'This request does not come from this site.' });
}

export const handleError: HandleServerError = ({ error, event, status, message }) => {
	if (status < 500) return { message: status === 404 ? 'There is nothing here.' : message };
	const id = newId();
	log().error({ id, err: error, route: event.route.id, request: event.locals.requestId });
	return { message: 'Something went wrong on our side.', id };
};
