import { createClient } from '@libsql/client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
	groupOfFour,
	joiningLink,
	newPerson,
	startGroup,
	type GroupOfFour
} from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { Visitor } from '../support/visitor';

let server: TestServer;
let group: GroupOfFour;
beforeAll(async () => {
	server = await startServer();
	group = await groupOfFour(server, 'Harbour Lane');
});
afterAll(() => server.stop());

async function sql(text: string, args: (string | number)[] = []) {
	const client = createClient({ url: server.databaseUrl });
	const { rows } = await client.execute({ sql: text, args });
	client.close();
	return rows;
}

async function memberId(email: string): Promise<string> {
	const [row] = await sql('SELECT id FROM users WHERE email = ?', [email]);
	return String(row?.id);
}

describe('starting a group', () => {
	it('makes an address from the name', async () => {
		const person = await newPerson(server);
		expect(await startGroup(person, 'Café Nine: Tuesday readers')).toBe(
			'cafe-nine-tuesday-readers'
		);
	});

	it.each([
		['no name', { name: '' }, 400, 'Give the group a name'],
		['an address that is no word', { name: 'X', slug: 'a/b' }, 400, 'Only letters'],
		['a reserved address', { name: 'X', slug: 'new' }, 400, 'reserved'],
		['a name no address can be made of', { name: '漢字' }, 400, 'No address can be made'],
		['an address that is taken', { name: 'X', slug: 'harbour-lane' }, 409, 'is taken'],
		['a long description', { name: 'X', description: 'x'.repeat(301) }, 400, 'At most 300']
	])('refuses %s', async (_, fields, status, message) => {
		const response = await group.owner.submit('/groups/new', fields);
		expect(response.status).toBe(status);
		expect(await response.text()).toContain(message);
	});

	it('shows a name with markup as text', async () => {
		const person = await newPerson(server, { name: '<script>alert(1)</script>' });
		const slug = await startGroup(person, '<img src=x onerror=alert(2)> readers');
		const page = await (await person.get(`/g/${slug}/members`)).text();
		expect(page).not.toContain('<img src=x');
		expect(page).not.toContain('<script>alert(1)');
		expect(page).toContain('&lt;script>alert(1)');
	});
});

describe('joining links', () => {
	it('let one person join, once', async () => {
		const link = await joiningLink(group.owner, group.slug, 'member');
		const person = await newPerson(server);
		const look = await person.get(link);
		expect(look.status).toBe(200);
		expect(await look.text()).toContain('Harbour Lane');
		expect((await person.get(`/g/${group.slug}/members`)).status).toBe(404);

		const joined = await person.submit(link);
		expect(joined.headers.get('location')).toBe(`/g/${group.slug}`);
		expect((await person.get(`/g/${group.slug}/members`)).status).toBe(200);
		// Used, it still leads those who are in the group to it, and nobody else.
		expect((await person.get(link)).headers.get('location')).toBe(`/g/${group.slug}`);
		expect((await group.owner.submit(link)).headers.get('location')).toBe(`/g/${group.slug}`);
		const second = await newPerson(server);
		expect((await second.get(link)).status).toBe(404);
		expect((await second.submit(link)).status).toBe(404);
	});

	it('are kept as a hash and leave a trace of who made and used them', async () => {
		const link = await joiningLink(group.owner, group.slug, 'observer');
		const token = link.slice('/join/'.length);
		const rows = await sql('SELECT * FROM invitations');
		expect(JSON.stringify(rows)).not.toContain(token);
		const trace = await sql("SELECT after FROM audit WHERE action = 'invitation.created'");
		expect(trace.length).toBeGreaterThan(0);
		expect(JSON.stringify(trace)).not.toContain(token);
	});

	it('are taken by one of twenty who try at once', async () => {
		const link = await joiningLink(group.owner, group.slug, 'member');
		const crowd = await Promise.all(Array.from({ length: 20 }, () => newPerson(server)));
		const answers = await Promise.all(crowd.map((person) => person.submit(link)));
		const statuses = answers.map(({ status }) => status).sort();
		expect(statuses).toEqual([303, ...Array(19).fill(404)]);
	});

	it('stay good when someone opens one who is in the group already', async () => {
		const link = await joiningLink(group.owner, group.slug, 'owner');
		expect((await group.observer.submit(link)).status).toBe(303);
		const page = await (await group.observer.get('/account')).text();
		expect(page).toContain('observer');
		expect((await (await newPerson(server)).submit(link)).status).toBe(303);
	});

	it('run out after fourteen days and can be revoked', async () => {
		const old = await joiningLink(group.owner, group.slug, 'member');
		const [last] = await sql(
			'SELECT id, expires_at - created_at AS life FROM invitations ORDER BY id DESC LIMIT 1'
		);
		expect(last?.life).toBe(14 * 86_400_000);
		await sql('UPDATE invitations SET expires_at = ? WHERE id = ?', [
			Date.now() - 1,
			String(last?.id)
		]);
		expect((await group.outsider.get(old)).status).toBe(404);

		const link = await joiningLink(group.owner, group.slug, 'member');
		const [made] = await sql('SELECT id FROM invitations ORDER BY id DESC LIMIT 1');
		const id = String(made?.id);
		const elsewhere = await group.outsider.submit(`/g/${group.outsiderSlug}/members?/revoke`, {
			id
		});
		expect(elsewhere.status).toBe(404);
		const revoked = await group.maintainer.submit(`/g/${group.slug}/members?/revoke`, { id });
		expect(revoked.status).toBe(200);
		expect((await group.outsider.submit(link)).status).toBe(404);
	});

	it('never give more than their maker has', async () => {
		const invite = (by: Visitor, role: string) =>
			by.submit(`/g/${group.slug}/members?/invite`, { role });
		expect((await invite(group.maintainer, 'maintainer')).status).toBe(200);
		expect((await invite(group.maintainer, 'owner')).status).toBe(403);
		expect((await invite(group.member, 'observer')).status).toBe(403);
		expect((await invite(group.maintainer, 'emperor')).status).toBe(400);
	});

	it('send a visitor to sign up and back', async () => {
		const link = await joiningLink(group.owner, group.slug, 'member');
		const page = await (await new Visitor(server).get(link)).text();
		expect(page).toContain(`/sign-up?next=${encodeURIComponent(link)}`);
	});
});

describe('roles', () => {
	it('are given by owners and count from the next request', async () => {
		const owner = await newPerson(server);
		const slug = await startGroup(owner, 'Weir Street');
		const person = await newPerson(server, { email: 'weir@group.example' });
		await person.submit(await joiningLink(owner, slug, 'member'));
		const user = await memberId('weir@group.example');
		const give = (by: Visitor, role: string) =>
			by.submit(`/g/${slug}/members?/role`, { user, role });

		expect((await give(person, 'owner')).status).toBe(403);
		expect((await give(owner, 'emperor')).status).toBe(400);
		expect((await give(owner, 'maintainer')).status).toBe(200);
		expect((await person.submit(`/g/${slug}/members?/invite`, { role: 'member' })).status).toBe(
			200
		);
		expect((await give(owner, 'observer')).status).toBe(200);
		expect((await person.submit(`/g/${slug}/members?/invite`, { role: 'member' })).status).toBe(
			403
		);

		const gone = await owner.submit(`/g/${slug}/members?/remove`, { user });
		expect(gone.status).toBe(200);
		expect((await person.get(`/g/${slug}/members`)).status).toBe(404);
	});

	it('leave a group at least one owner', async () => {
		const owner = await newPerson(server, { email: 'last@group.example' });
		const slug = await startGroup(owner, 'Mill Row');
		const user = await memberId('last@group.example');
		const down = await owner.submit(`/g/${slug}/members?/role`, { user, role: 'member' });
		expect(down.status).toBe(409);
		const leave = await owner.submit(`/g/${slug}/members?/remove`, { user });
		expect(leave.status).toBe(409);
		expect(await leave.text()).toContain('at least one owner');
	});

	it('let anyone leave, and nobody but owners remove others', async () => {
		const person = await newPerson(server, { email: 'leaver@group.example' });
		await person.submit(await joiningLink(group.owner, group.slug, 'member'));
		const user = await memberId('leaver@group.example');
		const path = `/g/${group.slug}/members?/remove`;
		expect((await group.maintainer.submit(path, { user })).status).toBe(403);
		expect((await person.submit(path, { user })).headers.get('location')).toBe('/account?left');
		expect((await person.submit(path, { user })).status).toBe(404);
	});
});
