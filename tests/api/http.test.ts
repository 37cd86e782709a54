import { spawnSync } from 'node:child_process';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { newPerson, PASSWORD, startGroup } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { Visitor } from '../support/visitor';

let server: TestServer;
beforeAll(async () => {
	server = await startServer();
});
afterAll(() => server.stop());

describe('every answer', () => {
	it.each(['/', '/sign-in', '/sign-up', '/nothing/here', '/api/v1/nothing', '/account'])(
		'of %s carries the headers that keep it in its place',
		async (path) => {
			const { headers } = await new Visitor(server).get(path);
			expect(headers.get('x-content-type-options')).toBe('nosniff');
			expect(headers.get('referrer-policy')).toBe('same-origin');
			expect(headers.get('cross-origin-opener-policy')).toBe('same-origin');
			expect(headers.get('content-security-policy')).toContain("frame-ancestors 'none'");
			expect(headers.get('x-request-id')).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7/);
			expect(headers.get('access-control-allow-origin')).toBeNull();
		}
	);

	it('that is a file is not taken for something else', async () => {
		const page = await (await new Visitor(server).get('/sign-in')).text();
		const style = /href="[./]*(\/_app\/immutable\/[^"]+\.css)"/.exec(page)?.[1] ?? '';
		for (const path of ['/favicon.svg', '/robots.txt', style]) {
			const response = await new Visitor(server).get(path);
			expect(response.status, path).toBe(200);
			expect(response.headers.get('x-content-type-options'), path).toBe('nosniff');
		}
	});

	it('that is a page lets only scripts with its nonce run', async () => {
		const response = await new Visitor(server).get('/sign-in');
		const policy = response.headers.get('content-security-policy') ?? '';
		const scripts = /script-src ([^;]*)/.exec(policy)?.[1] ?? '';
		const nonce = /'nonce-([^']+)'/.exec(scripts)?.[1] ?? '';
		expect(nonce.length).toBeGreaterThan(16);
		expect(scripts).not.toContain('unsafe');
		expect(policy).toContain("object-src 'none'");
		expect(policy).toContain("base-uri 'none'");
		expect(policy).toContain("form-action 'self'");
		const page = await response.text();
		expect(page).not.toContain('%modewatcher');
		const tags = page.match(/<script\b[^>]*>/g) ?? [];
		expect(tags.length).toBeGreaterThan(1);
		for (const tag of tags) expect(tag).toContain(`nonce="${nonce}"`);
		expect(
			(await new Visitor(server).get('/sign-in')).headers.get('content-security-policy')
		).not.toContain(nonce);
	});

	it('that is private is never stored, and a public one only for those who are nobody', async () => {
		const person = await newPerson(server);
		const caching = async (visitor: Visitor, path: string) =>
			(await visitor.get(path)).headers.get('cache-control');
		expect(await caching(person, '/account')).toBe('private, no-store');
		expect(await caching(person, '/account/__data.json')).toBe('private, no-store');
		expect(await caching(new Visitor(server), '/sign-in')).toBe('private, no-store');
		expect(await caching(person, '/')).toBe('private, no-store');
		const shared = await new Visitor(server).get('/');
		expect(shared.headers.get('cache-control')).toContain('public, max-age=');
		expect(shared.headers.get('vary')).toContain('Cookie');
	});

	it('of a page that is missing shows the error page, and nothing of the inside', async () => {
		const response = await new Visitor(server).get('/nothing/here');
		expect(response.status).toBe(404);
		const page = await response.text();
		expect(page).toContain('Not found');
		expect(page).not.toMatch(/at \w+ \(|node_modules|\.ts:/);
	});
});

describe('requests from other sites', () => {
	const methods = ['POST', 'PUT', 'PATCH', 'DELETE'];
	const types = [
		'application/x-www-form-urlencoded',
		'multipart/form-data; boundary=x',
		'text/plain',
		'application/json',
		'application/octet-stream',
		null
	];

	it.each(methods.flatMap((method) => types.map((type) => [method, type] as const)))(
		'%s with %s change nothing',
		async (method, type) => {
			const person = new Visitor(server);
			const foreign = { Origin: 'https://elsewhere.example', 'Sec-Fetch-Site': 'cross-site' };
			for (const path of ['/sign-out', '/groups/new', '/api/v1/readings']) {
				const response = await person.request(path, {
					method,
					headers: { ...foreign, ...(type && { 'Content-Type': type }) },
					body: type && 'name=x'
				});
				expect(response.status, path).toBe(403);
				expect(response.headers.get('content-type')).toContain('application/problem+json');
			}
		}
	);

	it('are refused without saying where from, and accepted from here', async () => {
		const person = await newPerson(server);
		const send = (headers: Record<string, string>) =>
			fetch(`${server.address}/groups/new`, {
				method: 'POST',
				redirect: 'manual',
				body: new URLSearchParams({ name: '' }),
				headers: { ...headers, Accept: 'text/html', Cookie: `merestone=${cookie}` }
			});
		const cookie = person.cookies.get('merestone') ?? '';
		expect((await send({})).status).toBe(403);
		expect((await send({ Origin: 'null' })).status).toBe(403);
		expect((await send({ Origin: server.origin })).status).toBe(400);
		expect((await send({ 'Sec-Fetch-Site': 'same-origin' })).status).toBe(400);
	});
});

describe('the API', () => {
	it('answers what does not exist as problem details', async () => {
		const response = await new Visitor(server).get('/api/v1/nothing');
		expect(response.status).toBe(404);
		expect(response.headers.get('content-type')).toBe('application/problem+json; charset=utf-8');
		expect(await response.json()).toMatchObject({ status: 404, title: 'Not found' });
	});

	it('names the methods that would do', async () => {
		const response = await new Visitor(server).sendJson('DELETE', '/api/v1/readings', {});
		expect(response.status).toBe(405);
		expect(response.headers.get('allow')).toContain('POST');
		expect(await response.json()).toMatchObject({ status: 405 });
	});
});

describe('over https', () => {
	let secure: TestServer;
	beforeAll(async () => {
		secure = await startServer({ env: { ORIGIN: 'https://merestone.example' } });
	});
	afterAll(() => secure.stop());

	it('the session cookie is bound to this host and kept from scripts', async () => {
		const response = await new Visitor(secure).submit('/sign-up', {
			name: 'Ada Fenwick',
			email: 'ada@secure.example',
			password: PASSWORD
		});
		expect(response.status).toBe(303);
		const [cookie = '', ...others] = response.headers.getSetCookie();
		expect(others).toEqual([]);
		expect(cookie).toMatch(/^__Host-merestone=[\w-]{27};/);
		const attributes = cookie.toLowerCase().split('; ').slice(1);
		expect(attributes).toEqual(
			expect.arrayContaining(['path=/', 'httponly', 'secure', 'samesite=lax'])
		);
		expect(cookie).not.toMatch(/domain/i);
	});

	it('browsers are told to stay there', async () => {
		const age = async (path: string) => {
			const { headers } = await new Visitor(secure).get(path);
			return Number(/max-age=(\d+)/.exec(headers.get('strict-transport-security') ?? '')?.[1]);
		};
		expect(await age('/sign-in')).toBeGreaterThanOrEqual(31_536_000);
		expect(await age('/favicon.svg')).toBeGreaterThanOrEqual(31_536_000);
	});
});

describe('limits on tries', () => {
	it('make the eleventh wrong password wait, and say how long', async () => {
		const strict = await startServer({ env: { MERESTONE_RATE_FACTOR: '1' } });
		try {
			await newPerson(strict, { email: 'tried@limits.example' });
			const attempt = (password: string, headers = {}) =>
				new Visitor(strict).submit(
					'/sign-in',
					{ email: 'tried@limits.example', password },
					headers
				);
			for (let i = 0; i < 10; i++) {
				expect((await attempt(`wrong password ${i}`)).status).toBe(401);
			}
			// A made-up address of the caller changes nothing.
			const refused = await attempt(PASSWORD, { 'X-Forwarded-For': '192.0.2.7' });
			expect(refused.status).toBe(429);
			expect(await refused.text()).toContain('Try again in');
			// The log's line may come after the answer.
			await vi.waitFor(() => expect(strict.logs()).toContain('"security":"rate-limited"'));
		} finally {
			await strict.stop();
		}
	});
});

describe('limits on requests', () => {
	it('answer 429 with the wait, and keep what was typed', async () => {
		const strict = await startServer({ env: { MERESTONE_RATE_FACTOR: '1' } });
		try {
			const person = await newPerson(strict, { email: 'typist@limits.example' });
			const slug = await startGroup(person, 'Limits');
			const claims = `/api/v1/groups/${slug}/claims`;
			const inTurn = async (times: number, send: () => Promise<Response>) => {
				const statuses = new Set<number>();
				for (let i = 0; i < times; i++) statuses.add((await send()).status);
				return [...statuses];
			};
			expect(await inTurn(240, () => person.sendJson('POST', claims, {}))).toEqual([400]);
			const problem = await person.sendJson('POST', claims, {});
			expect(problem.status).toBe(429);
			expect(problem.headers.get('content-type')).toContain('application/problem+json');
			expect(Number(problem.headers.get('retry-after'))).toBeGreaterThan(3_000);

			const typed = { printed: '2.8284271', locator: 'eq. (7), as typed' };
			const form = await person.submit(`/g/${slug}/claims/new?/enter`, typed);
			expect(form.status).toBe(429);
			expect(Number(form.headers.get('retry-after'))).toBeGreaterThan(3_000);
			const page = await form.text();
			expect(page).toContain('eq. (7), as typed');
			expect(page).toContain('Try again in');

			const visitor = new Visitor(strict);
			const look = () => visitor.get('/api/v1/claims/none');
			expect(await inTurn(600, look)).toEqual([404]);
			expect((await look()).status).toBe(429);
			expect((await visitor.get('/')).status).toBe(200);
		} finally {
			await strict.stop();
		}
	});
});

describe('a bad configuration', () => {
	it.each([
		[{ MERESTONE_SECRET: '' }, 'MERESTONE_SECRET: expected at least 32 characters'],
		[{ SMTP_URL: 'mail' }, 'SMTP_URL: expected an address'],
		[{ DATABASE_URL: 'postgres://x' }, 'DATABASE_URL: expected a file']
	])('%j stops the start with its name', (env, message) => {
		const { status, stdout, stderr } = spawnSync(process.execPath, ['build/index.js'], {
			env: {
				PATH: process.env.PATH,
				PORT: '0',
				MERESTONE_SECRET: 'a secret of the tests, of no use elsewhere',
				...env
			},
			encoding: 'utf8',
			timeout: 20_000
		});
		expect(status).not.toBe(0);
		expect(stdout + stderr).toContain(message);
	});
});

describe('a taken port', () => {
	it('stops the start and is named', () => {
		const port = new URL(server.address).port;
		const { status, stdout, stderr } = spawnSync(process.execPath, ['build/index.js'], {
			env: {
				PATH: process.env.PATH,
				HOST: '127.0.0.1',
				PORT: port,
				DATABASE_URL: `file:${server.folder}/other.db`,
				MERESTONE_SECRET: 'a secret of the tests, of no use elsewhere'
			},
			encoding: 'utf8',
			timeout: 20_000
		});
		expect(status).not.toBe(0);
		expect(stdout + stderr).toContain(`Port ${port} is taken`);
		expect(stdout + stderr).not.toMatch(/\n\s+at /);
	});
});
