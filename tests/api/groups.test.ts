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

describe('invitations by e-mail', () => {
	const members = (slug: string, action: string) => `/g/${slug}/members?/${action}`;
	const mailTo = async (address: string) => {
		for (let tries = 0; tries < 100; tries++) {
			const mail = server.mail.caught().find(({ to }) => to.includes(address));
			if (mail) return mail;
			await new Promise((resolve) => setTimeout(resolve, 200));
		}
		throw new Error(`no mail to ${address}`);
	};

	it('lead their reader through signing up into the group', async () => {
		const email = 'invited@reading.example';
		const sent = await group.maintainer.submit(members(group.slug, 'mail'), {
			emails: `${email}, reader-0@group.example`,
			role: 'member'
		});
		expect(sent.status).toBe(200);
		expect(await sent.text()).toContain('2 invitations go to');
		const mail = await mailTo(email);
		expect(mail.subject).toContain('Harbour Lane');
		const link = /\/join\/[\w-]{20,}/.exec(mail.text)?.[0] ?? '';

		const visitor = new Visitor(server);
		const look = await (await visitor.get(link)).text();
		expect(look).toContain(email);
		const next = `?next=${encodeURIComponent(link)}`;
		expect(look).toContain(`/sign-up${next}`);
		for (const page of ['sign-up', 'sign-in']) {
			const form = await (await visitor.get(`/${page}${next}`)).text();
			expect(form).toMatch(new RegExp(`<input[^>]*name="email"[^>]*value="${email}"`));
		}
		const person = await newPerson(server, { email, next: link });
		expect((await person.submit(link)).headers.get('location')).toBe(`/g/${group.slug}`);
		expect((await person.get(`/g/${group.slug}/claims/new`)).status).toBe(200);
	});

	it('keep what was typed, and name the address at fault', async () => {
		const emails = 'fine@reading.example, <b>wren</b>@';
		const refused = await group.owner.submit(members(group.slug, 'mail'), {
			emails,
			role: 'observer'
		});
		expect(refused.status).toBe(400);
		const page = await refused.text();
		expect(page).toContain('“&lt;b>wren&lt;/b>@” is no e-mail address');
		expect(page).toContain('fine@reading.example, &lt;b>wren&lt;/b>@');
		expect(page).toMatch(/<option value="observer"[^>]*selected/);
	});

	it('show nothing of themselves to those who may not make any', async () => {
		const page = await (await group.member.get(`/g/${group.slug}/members`)).text();
		expect(page).not.toContain('reader-0@group.example');
		expect(page).not.toContain('?/mail');
		const owners = await (await group.owner.get(`/g/${group.slug}/members`)).text();
		expect(owners).toContain('reader-0@group.example');
	});
});

describe('handing a group over', () => {
	it('makes the other one its owner at the next request', async () => {
		const owner = await newPerson(server);
		const slug = await startGroup(owner, 'Ferry Steps');
		const heir = await newPerson(server, { email: 'heir@group.example' });
		await heir.submit(await joiningLink(owner, slug, 'observer'));
		const alone = await (await owner.get(`/g/${slug}/members`)).text();
		expect(alone).toContain('Hand the group over');
		expect(alone).toContain('before you can leave');

		const user = await memberId('heir@group.example');
		const handed = await owner.submit(`/g/${slug}/members?/transfer`, { user });
		expect(handed.status).toBe(200);
		expect(await handed.text()).toContain('You are a maintainer');
		expect((await owner.submit(`/g/${slug}/members?/transfer`, { user })).status).toBe(403);
		expect((await heir.submit(`/g/${slug}/members?/role`, { user, role: 'owner' })).status).toBe(
			200
		);
	});
});

describe('settings', () => {
	const start = async (name: string) => {
		const owner = await newPerson(server);
		const slug = await startGroup(owner, name);
		const page = await (await owner.get(`/g/${slug}/settings`)).text();
		const version = /name="version" value="([^"]+)"/.exec(page)?.[1] ?? '';
		return { owner, slug, fields: { name, description: '', budgetSeconds: '', version } };
	};

	it('move a group to another address, to which the old one leads its members', async () => {
		const { owner, slug, fields } = await start('Sluice Court');
		const observer = await newPerson(server);
		await observer.submit(await joiningLink(owner, slug, 'observer'));
		const saved = await owner.submit(`/g/${slug}/settings?/save`, { ...fields, slug: 'sluice' });
		expect(saved.headers.get('location')).toBe('/g/sluice/settings?saved');
		expect(await (await owner.get('/g/sluice/settings?saved')).text()).toContain('are saved');

		const old = await observer.get('/g/sluice-court/members?x=1%2F2&y');
		expect(old.status).toBe(308);
		expect(old.headers.get('location')).toBe('/g/sluice/members?x=1%2F2&y');
		// Who takes the address back must not be led away by a browser that remembers.
		expect(old.headers.get('cache-control')).toContain('no-store');
		expect((await observer.get('/g/sluice-court')).headers.get('location')).toBe('/g/sluice');
		expect((await observer.get('/g/sluice-court/ledger.csv')).status).toBe(308);
		const data = await (await observer.get('/g/sluice-court/members/__data.json')).text();
		expect(JSON.parse(data)).toEqual({ type: 'redirect', location: '/g/sluice/members' });
		// The API answers at once, and a form sent from the old address is not lost.
		expect((await observer.get('/api/v1/groups/sluice-court/claims')).status).toBe(200);
		const form = await owner.submit('/g/sluice-court/members?/invite', { role: 'member' });
		expect(form.status).toBe(200);
		expect(await form.text()).toContain('/join/');

		expect((await group.outsider.get('/g/sluice-court/members')).status).toBe(404);
		const visitor = await new Visitor(server).get('/g/sluice-court/members');
		expect(visitor.headers.get('location')).toContain('/sign-in?next=');
		const taken = await group.outsider.submit('/groups/new', { name: 'X', slug: 'sluice-court' });
		expect(taken.status).toBe(409);
	});

	it('keep what was typed, and refuse to overwrite what was not seen', async () => {
		const { owner, slug, fields } = await start('Osier Bank');
		const save = (over: object) =>
			owner.submit(`/g/${slug}/settings?/save`, { ...fields, ...over });
		const wrong = await save({ description: 'Mine', budgetSeconds: '7000' });
		expect(wrong.status).toBe(400);
		const page = await wrong.text();
		expect(page).toContain('from 5 to 600');
		expect(page).toContain('value="7000"');
		expect((await save({ description: 'First' })).status).toBe(303);
		const stale = await save({ description: 'Second' });
		expect(stale.status).toBe(409);
		const shown = await stale.text();
		expect(shown).toContain('description “First”');
		expect(shown).toContain('Second');
		const version = /name="version" value="([^"]+)"/.exec(shown)?.[1] ?? '';
		expect((await save({ description: 'Second', version })).status).toBe(303);
	});

	it('show maintainers the address without letting them change it', async () => {
		const page = await (await group.maintainer.get(`/g/${group.slug}/settings`)).text();
		expect(page).toContain('Only owners change it');
		expect(page).not.toContain('name="slug"');
		const version = /name="version" value="([^"]+)"/.exec(page)?.[1] ?? '';
		const moved = await group.maintainer.submit(`/g/${group.slug}/settings?/save`, {
			name: 'Harbour Lane',
			version,
			slug: 'harbour'
		});
		expect(moved.status).toBe(403);
	});
});
