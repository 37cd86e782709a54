import { request } from 'node:http';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { BODY_LIMIT, UPLOAD_LIMIT } from '../../src/lib/server/http/body-limit';
import { groupOfFour, type GroupOfFour } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { claimFields } from '../support/service';
import type { Visitor } from '../support/visitor';

let server: TestServer;
let group: GroupOfFour;
let task: string;

beforeAll(async () => {
	server = await startServer();
	group = await groupOfFour(server, 'Weir Row');
	const { member, maintainer, slug } = group;
	const entered = await member.sendJson('POST', `/api/v1/groups/${slug}/claims`, claimFields());
	expect(entered.status).toBe(201);
	const opened = await maintainer.submit(`/g/${slug}/tasks/new?/open`, {
		claims: '1',
		kind: 'recompute'
	});
	task = opened.headers.get('location') ?? '';
	expect(task).toBe(`/g/${slug}/tasks/1`);
	expect((await member.submit(`${task}?/take`)).status).toBe(200);
});
afterAll(() => server.stop());

const START =
	'--limit\r\nContent-Disposition: form-data; name="kind"\r\n\r\nstatement\r\n' +
	'--limit\r\nContent-Disposition: form-data; name="files"; filename="digits.txt"\r\n' +
	'Content-Type: text/plain\r\n\r\n';
const END = '\r\n--limit--\r\n';

/** A form with one file, of so many bytes in all; its length told before or not. */
async function send(
	visitor: Visitor,
	path: string,
	bytes: number,
	framing: 'length' | 'chunked'
): Promise<{ status: number; text: string }> {
	const filler = Buffer.alloc(bytes - START.length - END.length, '0');
	const body = Buffer.concat([Buffer.from(START), filler, Buffer.from(END)]);
	const cookie = [...visitor.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
	return new Promise((resolve, reject) => {
		const sent = request(
			new URL(path, server.address),
			{
				method: 'POST',
				headers: {
					Accept: 'text/html',
					Cookie: cookie,
					Origin: server.origin,
					'Content-Type': 'multipart/form-data; boundary=limit',
					...(framing === 'length'
						? { 'Content-Length': body.length }
						: { 'Transfer-Encoding': 'chunked' })
				}
			},
			(response) => {
				const chunks: Buffer[] = [];
				response.on('data', (chunk: Buffer) => chunks.push(chunk));
				response.on('error', reject);
				response.on('end', () =>
					resolve({ status: response.statusCode ?? 0, text: Buffer.concat(chunks).toString() })
				);
			}
		);
		sent.on('error', reject);
		sent.end(body);
	});
}

/** What the service says of a file past its own limit: the body itself was let in and read. */
const LET_IN = 'a file may have 10 MB';

describe('a body', () => {
	it('of a form may have its limit and not one byte more', async () => {
		const at = await send(group.member, '/groups/new', BODY_LIMIT, 'length');
		expect(at.status).toBe(400);
		expect(at.text).toContain('</html>');
		const past = await send(group.member, '/groups/new', BODY_LIMIT + 1, 'length');
		expect(past.status).toBe(413);
		expect(JSON.parse(past.text)).toMatchObject({
			detail: `The body has ${BODY_LIMIT + 1} bytes; here it may have ${BODY_LIMIT}.`
		});
	});

	it('whose length nobody says is refused, but where files are handed in', async () => {
		expect((await send(group.member, '/groups/new', 1_000, 'chunked')).status).toBe(411);
		const small = await send(group.member, `${task}?/submit`, 1_000, 'chunked');
		expect(small.status).toBe(200);
		expect((await group.maintainer.submit(`${task}?/return`, { reason: 'Again.' })).status).toBe(
			200
		);
	});

	it.each(['length', 'chunked'] as const)(
		'with files may have the limit of all files together, by %s',
		async (framing) => {
			const at = await send(group.member, `${task}?/submit`, UPLOAD_LIMIT, framing);
			expect(at.text).toContain(LET_IN);
			const past = await send(group.member, `${task}?/submit`, UPLOAD_LIMIT + 1, framing);
			expect(past.status).toBe(413);
			expect(past.text).not.toContain(LET_IN);
		}
	);

	it('with files has no larger limit for nobody, nor for another form', async () => {
		const nobody = await send(group.anonymous, `${task}?/submit`, BODY_LIMIT + 1, 'length');
		expect(nobody.status).toBe(413);
		const other = await send(group.member, `${task}?/take`, BODY_LIMIT + 1, 'length');
		expect(other.status).toBe(413);
	});
});

describe('a file handed in', () => {
	const NAME = 'Überblick "level 2".txt';

	async function handIn(name: string, content: string): Promise<Response> {
		const form = new FormData();
		form.set('kind', 'statement');
		form.append('files', new File([content], name));
		// What a browser sends of a second field that was left empty.
		form.append('files', new File([], ''));
		return group.member.request(`${task}?/submit`, { method: 'POST', body: form });
	}

	it('is an attachment that runs nothing, for the group alone', async () => {
		const content = '<script>alert(1)</script>\n';
		expect((await handIn(NAME, content)).status).toBe(200);
		const page = await (await group.observer.get(task)).text();
		const ids = page.match(/\/files\/[0-9a-f-]{36}/g) ?? [];
		// Ids of version 7 sort by their time.
		const path = `/g/${group.slug}${[...ids].sort().at(-1) ?? ''}`;
		const response = await group.observer.get(path);
		expect(response.status).toBe(200);
		expect(await response.text()).toBe(content);
		const { headers } = response;
		expect(headers.get('content-type')).toBe('text/plain; charset=utf-8');
		expect(headers.get('content-length')).toBe(String(content.length));
		expect(headers.get('content-disposition')).toBe(
			'attachment; filename="_berblick _level 2_.txt"; ' +
				"filename*=UTF-8''%C3%9Cberblick%20_level%202_.txt"
		);
		expect(headers.get('x-content-type-options')).toBe('nosniff');
		expect(headers.get('content-security-policy')).toContain('sandbox');
		expect(headers.get('cache-control')).toBe('private, no-store');
		expect((await group.outsider.get(path)).status).toBe(404);
		expect((await group.anonymous.get(path)).status).toBe(303);
		// Nor under the group of somebody else.
		const elsewhere = path.replace(group.slug, group.outsiderSlug);
		expect((await group.outsider.get(elsewhere)).status).toBe(404);
	});

	it('that is none is refused on the form, with what was typed', async () => {
		expect((await group.maintainer.submit(`${task}?/return`, { reason: 'Again.' })).status).toBe(
			200
		);
		const form = new FormData();
		form.set('kind', 'statement');
		form.set('comment', 'A heron told us.');
		form.append('files', new File(['MZ'], '../../etc/run.exe'));
		const response = await group.member.request(`${task}?/submit`, { method: 'POST', body: form });
		expect(response.status).toBe(400);
		const page = await response.text();
		expect(page).toContain('“run.exe” ends in .exe, which is not taken');
		expect(page).toContain('A heron told us.');
		expect(page).not.toContain('etc/run');
	});
});
