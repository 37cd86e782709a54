import type { RequestEvent } from '@sveltejs/kit';
import { createHash } from 'node:crypto';
import type { z } from 'zod';
import { ServiceError } from '../errors';
import { parseInput } from '../services/parse-input';
import { problemOf, problemResponse } from './problem';
import { countRequest } from './request-limits';

/** Largest JSON body of an endpoint that names no limit of its own. */
export const JSON_LIMIT_BYTES = 300_000;

/** Wraps an endpoint: visitors are counted, and whatever it throws becomes problem details. */
export function endpoint<E extends RequestEvent>(
	handler: (event: E) => Promise<Response> | Response
): (event: E) => Promise<Response> {
	return async (event) => {
		try {
			if (!event.locals.actor) await countRequest(event, 'anonymous');
			return await handler(event);
		} catch (thrown) {
			return problemOf(thrown);
		}
	};
}

/**
 * Reads and parses a JSON body.
 * @throws ServiceError invalid, too-large
 */
export async function readJson<T extends z.ZodType>(
	event: RequestEvent,
	schema: T,
	limit = JSON_LIMIT_BYTES
): Promise<z.output<T>> {
	const type = event.request.headers.get('content-type') ?? '';
	if (!/^application\/(json|[\w.-]+\+json)\s*(;|$)/i.test(type)) {
		throw new ServiceError('invalid', 'Send JSON, with Content-Type: application/json.');
	}
	const text = await readText(event.request, limit);
	let body: unknown;
	try {
		// A key that would reach an object's prototype has no place in any input of ours.
		body = JSON.parse(text, (key, value: unknown) => (key === '__proto__' ? undefined : value));
	} catch (error) {
		throw new ServiceError('invalid', `The body is no JSON: ${(error as Error).message}`);
	}
	return parseInput(schema, body);
}

/** A body past the limit is read to its end but not kept: an answer to half a request gets lost. */
async function readText(request: Request, limit: number): Promise<string> {
	const chunks: Uint8Array[] = [];
	let length = 0;
	for await (const chunk of request.body ?? []) {
		length += chunk.byteLength;
		if (length <= limit) chunks.push(chunk);
	}
	if (length > limit) {
		const bytes = limit.toLocaleString('en');
		throw new ServiceError('too-large', `The body has more than ${bytes} bytes.`);
	}
	return new TextDecoder().decode(Buffer.concat(chunks));
}

export interface JsonAnswer {
	readonly status?: number;
	readonly headers?: Readonly<Record<string, string>>;
}

/** A JSON answer. */
export function jsonResponse(data: unknown, { status = 200, headers = {} }: JsonAnswer = {}) {
	return new Response(JSON.stringify(data), {
		status,
		headers: { 'Content-Type': 'application/json; charset=utf-8', ...headers }
	});
}

/** A JSON answer to a GET, with a strong ETag; 304 when the caller has it already. */
export function jsonWithEtag(
	event: RequestEvent,
	data: unknown,
	answer: JsonAnswer = {}
): Response {
	return textWithEtag(event, JSON.stringify(data), {
		...answer,
		headers: { 'Content-Type': 'application/json; charset=utf-8', ...answer.headers }
	});
}

/** The same for a text of any kind; its `Content-Type` is among the headers. */
export function textWithEtag(event: RequestEvent, text: string, answer: JsonAnswer): Response {
	const etag = `"${createHash('sha256').update(text).digest('base64url').slice(0, 22)}"`;
	const headers = { ...answer.headers, ETag: etag };
	const known = event.request.headers.get('if-none-match') ?? '';
	const same = known.split(',').some((tag) => tag.trim().replace(/^W\//, '') === etag);
	if (same) return new Response(null, { status: 304, headers });
	return new Response(text, { status: answer.status ?? 200, headers });
}

/** Answers of the framework itself under /api (no such route or method) as problem details too. */
export function asProblem(event: RequestEvent, response: Response): Response {
	if (!event.url.pathname.startsWith('/api/') || response.status < 400) return response;
	if (response.headers.get('content-type')?.startsWith('application/problem+json')) return response;
	const allow = response.headers.get('allow');
	const problem = problemResponse({
		status: response.status,
		detail: allow ? `Use one of: ${allow}.` : 'There is nothing at this address.'
	});
	if (allow) problem.headers.set('Allow', allow);
	return problem;
}
