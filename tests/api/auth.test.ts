import { createClient } from '@libsql/client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { hashToken } from '../../src/lib/server/ids';
import { newPerson, PASSWORD, startGroup } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { Visitor } from '../support/visitor';

let server: TestServer;
beforeAll(async () => {
	server = await startServer();
});
afterAll(() => server.stop());

const email = (name: string) => `${name}@auth.example`;
const signIn = (visitor: Visitor, fields: Record<string, string>) =>
	visitor.submit('/sign-in', { email: '', password: PASSWORD, ...fields });

describe('signing up', () => {
	it('opens a session and leads to the account', async () => {
		const visitor = new Visitor(server);
		const response = await visitor.submit('/sign-up', {
			name: 'Ada Fenwick',
			email: ' Ada@Auth.example ',
			password: PASSWORD
		});
		expect(response.status).toBe(303);
		expect(response.headers.get('location')).toBe('/account');
		const page = await (await visitor.get('/account')).text();
		expect(page).toContain('Ada Fenwick');
		expect(page).toContain('ada@auth.example');
	});

	it.each([
		['no name', { name: ' ' }, 'Give your name'],
		['two lines as a name', { name: 'Ada\r\nBcc: x@y.example' }, 'Only one line'],
		['no address', { email: 'ada' }, 'This is no e-mail address'],
		['14 characters', { password: 'lichen gate 17' }, 'at least 15'],
		['a password of the address', { password: 'fresh@auth.example' }, 'mostly your name'],
		['a password of many', { password: 'password12345678' }, 'Too many people'],
		['129 characters', { password: 'lichen gate '.repeat(11) }, 'at most 128']
	])('refuses %s and keeps what was typed, but the password', async (_, fields, message) => {
		const response = await new Visitor(server).submit('/sign-up', {
			name: 'Ada Fenwick',
			email: email('fresh'),
			password: PASSWORD,
			...fields
		});
		expect(response.status).toBe(400);
		const page = await response.text();
		expect(page).toContain(message);
		expect(page).toContain('value="' + ('email' in fields ? fields.email : email('fresh')) + '"');
		expect(page).not.toContain(PASSWORD);
	});

	it('refuses an address that has an account, whatever its case', async () => {
		await newPerson(server, { email: email('taken') });
		const response = await new Visitor(server).submit('/sign-up', {
			name: 'Another',
			email: 'TAKEN@auth.example',
			password: PASSWORD
		});
		expect(response.status).toBe(409);
		expect(await response.text()).toContain('has an account already');
	});

	it('takes no rights from the form', async () => {
		const visitor = await newPerson(server, { isAdmin: 'true', is_admin: '1', role: 'owner' });
		expect((await visitor.get('/account')).status).toBe(200);
		const client = createClient({ url: server.databaseUrl });
		const admins = await client.execute('SELECT count(*) FROM users WHERE is_admin');
		client.close();
		expect(Number(admins.rows[0]?.[0])).toBe(0);
	});
});

describe('signing in and out', () => {
	it('gives a new session each time, kept only as a hash, and ends it on the server', async () => {
		const first = await newPerson(server, { email: email('ida') });
		const before = first.cookies.get('merestone') ?? '';
		const response = await signIn(first, { email: email('ida') });
		expect(response.status).toBe(303);
		const after = first.cookies.get('merestone') ?? '';
		expect(after).toMatch(/^[\w-]{27}$/);
		expect(after).not.toBe(before);
		const old = new Visitor(server);
		old.cookies.set('merestone', before);
		expect((await old.get('/account')).status).toBe(303);

		const client = createClient({ url: server.databaseUrl });
		const ids = (await client.execute('SELECT id FROM sessions')).rows.map((row) => String(row[0]));
		client.close();
		expect(ids.join()).not.toContain(after);

		const copy = new Visitor(server);
		copy.cookies.set('merestone', after);
		expect((await copy.get('/account')).status).toBe(200);
		const out = await first.submit('/sign-out');
		expect(out.headers.get('location')).toBe('/');
		expect(first.cookies.has('merestone')).toBe(false);
		expect((await copy.get('/account')).headers.get('location')).toContain('/sign-in');
	});

	it('answers a wrong password and an unknown address alike', async () => {
		await newPerson(server, { email: email('known') });
		const wrong = await signIn(new Visitor(server), {
			email: email('known'),
			password: 'another long password'
		});
		const unknown = await signIn(new Visitor(server), {
			email: email('nobody'),
			password: 'another long password'
		});
		expect([wrong.status, unknown.status]).toEqual([401, 401]);
		const words = async (response: Response, address: string) =>
			(await response.text()).replaceAll(address, '').replace(/nonce="[^"]+"/g, '');
		expect(await words(wrong, email('known'))).toBe(await words(unknown, email('nobody')));
	});

	it('leads back to where one came from, within the site only', async () => {
		const visitor = await newPerson(server, { email: email('next') });
		const anonymous = await new Visitor(server).get('/groups/new?x=1');
		expect(anonymous.status).toBe(303);
		expect(anonymous.headers.get('location')).toBe('/sign-in?next=%2Fgroups%2Fnew%3Fx%3D1');
		for (const [next, goes] of [
			['/groups/new?x=1', '/groups/new?x=1'],
			['https://elsewhere.example', '/account'],
			['//elsewhere.example', '/account'],
			['/\\elsewhere.example', '/account'],
			['javascript:alert(1)', '/account']
		] as const) {
			const response = await signIn(visitor, { email: email('next'), next });
			expect(response.headers.get('location'), next).toBe(goes);
		}
	});

	it('leads home once one is in a group', async () => {
		const visitor = await newPerson(server, { email: email('home') });
		await startGroup(visitor, 'Landing stage');
		const response = await signIn(visitor, { email: email('home') });
		expect(response.headers.get('location')).toBe('/home');
		expect((await visitor.get('/sign-in')).headers.get('location')).toBe('/home');
		expect(await (await visitor.get('/home')).text()).toContain('Landing stage');
	});

	it('forgets a cookie that means nothing', async () => {
		const visitor = new Visitor(server);
		visitor.cookies.set('merestone', "' OR 1=1 --");
		const response = await visitor.get('/sign-in');
		expect(response.status).toBe(200);
		expect(visitor.cookies.has('merestone')).toBe(false);
	});
});

describe('the account page', () => {
	it('lists sessions, ends another one and all others', async () => {
		const here = await newPerson(server, { email: email('places') });
		const there = new Visitor(server);
		await signIn(there, { email: email('places') });
		const elsewhere = new Visitor(server);
		await signIn(elsewhere, { email: email('places') });

		const page = await (await here.get('/account')).text();
		const handles = [...page.matchAll(/name="session" value="([0-9a-f]{16})"/g)];
		expect(handles).toHaveLength(2);
		await here.submit('/account?/end', { session: handles[0]?.[1] ?? '' });
		expect((await elsewhere.get('/account')).status).toBe(303);
		await here.submit('/account?/endOthers');
		expect((await there.get('/account')).status).toBe(303);
		expect((await here.get('/account')).status).toBe(200);
	});

	it("does not end somebody else's session", async () => {
		const other = await newPerson(server);
		const own = await newPerson(server);
		const mine = hashToken(own.cookies.get('merestone') ?? '');
		const client = createClient({ url: server.databaseUrl });
		const ids = (await client.execute('SELECT id FROM sessions')).rows.map((row) => String(row[0]));
		client.close();
		expect(ids).toContain(mine);
		const statuses = new Set<number>();
		for (const id of ids.filter((one) => one !== mine)) {
			const fields = { session: id.slice(0, 16) };
			statuses.add((await own.submit('/account?/end', fields)).status);
		}
		expect([...statuses]).toEqual([404]);
		expect((await other.get('/account')).status).toBe(200);
	});

	it('changes the password after the current one, and ends all other sessions', async () => {
		const here = await newPerson(server, { email: email('change') });
		const there = new Visitor(server);
		await signIn(there, { email: email('change') });
		const next = 'a heron at gate seventeen';
		const change = (current: string) =>
			here.submit('/account?/password', { current, password: next });

		const wrong = await change('not my password at all');
		expect(wrong.status).toBe(400);
		expect(await wrong.text()).toContain('not your current password');
		expect((await there.get('/account')).status).toBe(200);

		const right = await change(PASSWORD);
		expect(right.status).toBe(200);
		expect(await right.text()).toContain('Your password is changed');
		expect((await there.get('/account')).status).toBe(303);
		expect((await here.get('/account')).status).toBe(200);
		expect((await signIn(there, { email: email('change') })).status).toBe(401);
		const again = await signIn(there, { email: email('change'), password: next });
		expect(again.status).toBe(303);
	});
});

describe('the log', () => {
	it('tells who signed in and failed, without passwords, tokens or addresses', async () => {
		const visitor = await newPerson(server, { email: email('logged') });
		await signIn(visitor, { email: email('logged'), password: 'a wrong one, and long' });
		const lines = server.logs();
		expect(lines).toContain('"security":"sign-up"');
		expect(lines).toContain('"security":"sign-in-failed"');
		for (const secret of [
			PASSWORD,
			'a wrong one, and long',
			visitor.cookies.get('merestone') ?? 'no cookie',
			email('logged')
		]) {
			expect(lines).not.toContain(secret);
		}
	});
});
