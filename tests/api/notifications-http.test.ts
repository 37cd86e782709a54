import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase } from '../../src/lib/server/db/client';
import { outbox } from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { unsubscribeToken } from '../../src/lib/server/services/notifications/unsubscribe';
import { newPerson } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { Visitor } from '../support/visitor';

/** The built server's own, so that a token made here is good there. */
process.env.MERESTONE_SECRET ??= 'a secret of the tests, of no use elsewhere';

let server: TestServer;
let person: Visitor;
let userId: string;
beforeAll(async () => {
	server = await startServer();
	person = await newPerson(server);
	const account = await (await person.get('/account')).text();
	userId = /Account id[\s\S]*?([0-9a-f]{8}-[0-9a-f-]{27})/.exec(account)?.[1] ?? '';
});
afterAll(() => server.stop());

const choices = async () => (await person.get('/account/notifications')).text();

/** Whether the radio button of that choice is the one chosen. */
async function isChosen(kind: string, delivery: string): Promise<boolean> {
	const buttons = (await choices()).match(/<input type="radio"[^>]*>/g) ?? [];
	const button = buttons.find(
		(each) => each.includes(`name="${kind}"`) && each.includes(`value="${delivery}"`)
	);
	if (!button) throw new Error(`no button ${kind} ${delivery}`);
	return /\schecked/.test(button);
}

/** As a mail program sends it: RFC 8058, section 3.2; no cookie, no Origin, any Accept. */
function oneClick(path: string, headers: Readonly<Record<string, string>> = {}): Promise<Response> {
	return fetch(server.address + path, {
		method: 'POST',
		redirect: 'manual',
		headers: { 'Content-Type': 'application/x-www-form-urlencoded', Accept: '*/*', ...headers },
		body: 'List-Unsubscribe=One-Click'
	});
}

describe('the link of a mail', () => {
	it('shows what it turns off, and looking changes nothing', async () => {
		const path = `/unsubscribe/${unsubscribeToken(userId, 'mention')}`;
		const page = await new Visitor(server).get(path);
		expect(page.status).toBe(200);
		expect(page.headers.get('referrer-policy')).toBe('no-referrer');
		expect(page.headers.get('cache-control')).toBe('private, no-store');
		expect(await page.text()).toContain('Somebody mentions me');
		expect(await isChosen('mention', 'at-once')).toBe(true);
	});

	it('takes one click of a mail program, a second one too, and one with a foreign origin', async () => {
		const path = `/unsubscribe/${unsubscribeToken(userId, 'task-assigned')}`;
		expect((await oneClick(path)).status).toBe(200);
		expect(await isChosen('task-assigned', 'never')).toBe(true);
		expect(await isChosen('mention', 'at-once')).toBe(true);
		expect((await oneClick(path)).status).toBe(200);
		const headers = { Origin: 'https://mail.example', 'Sec-Fetch-Site': 'cross-site' };
		const again = await oneClick(path, headers);
		expect(again.status).toBe(200);
		expect(again.headers.getSetCookie()).toEqual([]);
	});

	it('works as a form without JavaScript', async () => {
		const path = `/unsubscribe/${unsubscribeToken(userId, 'digest')}`;
		const page = await new Visitor(server).submit(path);
		expect(page.status).toBe(200);
		expect(await page.text()).toContain('The daily digest no longer comes');
		expect(await isChosen('comment', 'never')).toBe(true);
	});

	it('that is not ours is answered with 404', async () => {
		const token = unsubscribeToken(userId, 'mention').slice(0, -1);
		for (const bad of [token, 'nothing', `${userId}.mention.`]) {
			expect((await oneClick(`/unsubscribe/${bad}`)).status).toBe(404);
			expect((await new Visitor(server).get(`/unsubscribe/${bad}`)).status).toBe(404);
		}
	});

	it('opens no other door to requests from elsewhere', async () => {
		expect((await oneClick('/account/notifications?/save')).status).toBe(403);
		expect((await oneClick('/news?/all')).status).toBe(403);
	});
});

describe('choices', () => {
	it('are saved by a plain form', async () => {
		const page = await person.submit('/account/notifications?/save', { mention: 'daily' });
		expect(page.status).toBe(200);
		expect(await page.text()).toContain('Your choices are saved');
		expect(await isChosen('mention', 'daily')).toBe(true);
	});

	it('that are none are refused in words', async () => {
		const page = await person.submit('/account/notifications?/save', { mention: 'hourly' });
		expect(page.status).toBe(400);
		expect(await page.text()).toContain('Choose at once, daily or never');
		expect(await isChosen('mention', 'daily')).toBe(true);
	});
});

describe('the administrator’s page of mail', () => {
	it('is there for whom the operator named, and for nobody else', async () => {
		const other = await newPerson(server);
		expect((await person.get('/admin/mail')).status).toBe(404);
		await server.kill();
		const id = newId();
		const { db, close } = await openDatabase(server.databaseUrl);
		await db.write((tx) =>
			tx.insert(outbox).values({
				id,
				kind: 'digest',
				dedupeKey: id,
				messageId: `<${id}@test.example>`,
				userId,
				state: 'dead',
				attempts: 10,
				lastError: '421 the lights are off',
				notBefore: new Date(),
				createdAt: new Date()
			})
		);
		close();
		const unknown = newId();
		server = await startServer({
			folder: server.folder,
			env: { MERESTONE_ADMINS: `${userId}, ${unknown}` }
		});
		const again = (visitor: Visitor) => {
			const next = new Visitor(server);
			for (const [name, value] of visitor.cookies) next.cookies.set(name, value);
			return next;
		};
		person = again(person);
		expect(server.logs()).toContain(unknown);
		const page = await person.get('/admin/mail');
		expect(page.status).toBe(200);
		const text = await page.text();
		expect(text).toContain('421 the lights are off');
		expect(text).toContain('Try all 1 dead again');
		expect((await again(other).get('/admin/mail')).status).toBe(404);
		expect((await again(other).submit('/admin/mail?/retry', { id })).status).toBe(404);
		const retried = await person.submit('/admin/mail?/retry', { id });
		expect(retried.status).toBe(200);
		expect(await retried.text()).toContain('tried again at once');
		// A digest of nothing has nothing to tell.
		await new Promise((resolve) => setTimeout(resolve, 3_000));
		expect(await (await person.get('/admin/mail?state=dropped')).text()).toContain('Daily digest');
		expect((await person.submit('/admin/mail?/discard', { id })).status).toBe(404);
		// Taken from the settings, taken from the account.
		await server.kill();
		server = await startServer({ folder: server.folder });
		person = again(person);
		expect((await person.get('/admin/mail')).status).toBe(404);
	});
});
