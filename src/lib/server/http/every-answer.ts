import { subscribe } from 'node:diagnostics_channel';
import { ServerResponse } from 'node:http';
import { config } from '../config';

let done = false;

/**
 * Headers of every answer of this process: files of static/ and the built scripts are sent before
 * the hook is reached, and an error inside the framework does not reach it either.
 */
export function setHeadersOfEveryAnswer(): void {
	if (done) return;
	done = true;
	const { secure } = config();
	subscribe('http.server.request.start', (message) => {
		const response: unknown = Reflect.get(Object(message), 'response');
		if (!(response instanceof ServerResponse)) return;
		response.setHeader('X-Content-Type-Options', 'nosniff');
		if (secure) response.setHeader('Strict-Transport-Security', STRICT_TRANSPORT);
	});
}

/** Two years. */
export const STRICT_TRANSPORT = 'max-age=63072000; includeSubDomains';
