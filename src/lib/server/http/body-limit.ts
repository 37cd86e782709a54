import type { RequestEvent } from '@sveltejs/kit';
import { TASK_LIMITS } from '../../schemas/task-input';
import { problemResponse } from './problem';

/** Forms and JSON: adapter-node's own default, which uploads made us raise for the whole server. */
export const BODY_LIMIT = 512 * 1024;

/**
 * Files at their largest, a certificate, and the form around them. svelte.config.js writes the same
 * number into the build as adapter-node's BODY_SIZE_LIMIT, which counts what arrives.
 */
export const UPLOAD_LIMIT =
	TASK_LIMITS.files * TASK_LIMITS.fileBytes + TASK_LIMITS.certificate + 2_000_000;

/** A certificate pasted and chosen as a file, and the form around it. */
export const ATTACH_LIMIT = 2 * TASK_LIMITS.certificate + BODY_LIMIT;

/** The form that takes files, and only from those who have signed in. */
function takesUploads({ route, url, locals }: RequestEvent): boolean {
	const isTask = /\/g\/\[slug\]\/tasks\/\[number\]$/.test(route.id ?? '');
	return isTask && url.searchParams.has('/submit') && locals.actor !== null;
}

/** The form of a claim's page that takes a certificate. */
function takesCertificate({ route, url, locals }: RequestEvent): boolean {
	const isClaim = /\/g\/\[slug\]\/claims\/\[number\]$/.test(route.id ?? '');
	return isClaim && url.searchParams.has('/attach') && locals.actor !== null;
}

/**
 * The refusal of a body that is too large for its route, or null. A body whose length is not said
 * can't be refused before it is read, so that only uploads may come so: adapter-node counts those.
 */
export async function refuseBody(event: RequestEvent): Promise<Response | null> {
	const { request } = event;
	if (request.body === null) return null;
	const uploads = takesUploads(event);
	const length = request.headers.get('content-length');
	if (length === null) {
		if (uploads) return null;
		await readAway(request);
		return problemResponse({ status: 411, detail: 'Send the length of the body with it.' });
	}
	const limit = uploads ? UPLOAD_LIMIT : takesCertificate(event) ? ATTACH_LIMIT : BODY_LIMIT;
	if (Number(length) <= limit) return null;
	await readAway(request);
	const detail = `The body has ${length} bytes; here it may have ${limit}.`;
	return problemResponse({ status: 413, detail });
}

/** To its end, keeping nothing: an answer to half a request gets lost on the way. */
async function readAway(request: Request): Promise<void> {
	try {
		for await (const chunk of request.body ?? []) void chunk;
	} catch {
		// Longer than the server takes at all: adapter-node stopped reading.
	}
}
