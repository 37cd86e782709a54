import type { RequestEvent } from '@sveltejs/kit';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { ATTACH_LIMIT, BODY_LIMIT, UPLOAD_LIMIT, refuseBody } from './body-limit';

const TASK = '/(group)/g/[slug]/tasks/[number]';
const CLAIM = { route: '/(group)/g/[slug]/claims/[number]', query: '?/attach' };

interface Sent {
	readonly route?: string;
	readonly query?: string;
	readonly length?: number | null;
	readonly signedIn?: boolean;
	readonly body?: string;
}

async function statusOf(sent: Sent): Promise<number | null> {
	const { route = TASK, query = '?/submit', length = 1, signedIn = true, body = 'x' } = sent;
	const url = new URL(`http://merestone.example/g/first/tasks/1${query}`);
	const headers = new Headers(length === null ? {} : { 'Content-Length': String(length) });
	const request = new Request(url, { method: 'POST', body: body || null });
	// The constructor lets nobody set a length; a server gets it from the wire.
	Object.defineProperty(request, 'headers', { value: headers });
	const actor = { id: '1', name: 'Mo', email: 'mo@reading.example', isAdmin: false };
	const locals = { actor: signedIn ? actor : null, requestId: 'test' };
	const event = { request, url, route: { id: route }, locals };
	return (await refuseBody(event as unknown as RequestEvent))?.status ?? null;
}

describe('refuseBody', () => {
	it.each([
		['a form at its limit', { query: '', length: BODY_LIMIT }, null],
		['a form past it', { query: '', length: BODY_LIMIT + 1 }, 413],
		['a form of unknown length', { query: '', length: null }, 411],
		['no body at all', { query: '', length: null, body: '' }, null],
		['an upload at its limit', { length: UPLOAD_LIMIT }, null],
		['an upload past it', { length: UPLOAD_LIMIT + 1 }, 413],
		['an upload of unknown length', { length: null }, null],
		['an upload of nobody', { signedIn: false, length: BODY_LIMIT + 1 }, 413],
		['an upload of nobody, of unknown length', { signedIn: false, length: null }, 411],
		['a certificate at its limit', { ...CLAIM, length: ATTACH_LIMIT }, null],
		['a certificate past it', { ...CLAIM, length: ATTACH_LIMIT + 1 }, 413],
		['a certificate of nobody', { ...CLAIM, signedIn: false, length: BODY_LIMIT + 1 }, 413],
		['a certificate of unknown length', { ...CLAIM, length: null }, 411],
		['an upload elsewhere', { route: '/(group)/g/[slug]', length: BODY_LIMIT + 1 }, 413]
	] satisfies [string, Sent, number | null][])('answers %s', async (_, sent, status) => {
		expect(await statusOf(sent)).toBe(status);
	});

	it('has the limit that the build gives to adapter-node', () => {
		const written = /BODY_SIZE_LIMIT = ([\d_]+)/.exec(readFileSync('svelte.config.js', 'utf8'));
		expect(Number(written?.[1]?.replaceAll('_', ''))).toBe(UPLOAD_LIMIT);
	});
});
