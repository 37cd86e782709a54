import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startMailSink, type MailSink } from '../../src/lib/server/mail/sink';
import { atRest, hostileWorld, type HostileWorld } from '../support/hostile-world';
import { startServer, type TestServer } from '../support/server';
import { bibtexOf, claimFields } from '../support/service';
import { tableDigests } from '../support/whole-database';

let folder: string;
let sink: MailSink;
let server: TestServer;
let world: HostileWorld;

beforeAll(async () => {
	folder = mkdtempSync(join(tmpdir(), 'merestone-mail-'));
	sink = await startMailSink(folder);
	// The limits as they are in production.
	server = await startServer({ env: { SMTP_URL: sink.url, MERESTONE_RATE_FACTOR: '1' } });
	world = await hostileWorld(server, 'Sill, Bcc: all@evil.example');
});
afterAll(async () => {
	await server.stop();
	await sink.close();
	rmSync(folder, { recursive: true, force: true });
});

const CRLF = '\r\nBcc: all@evil.example\r\nContent-Type: text/html\r\n\r\n<b>x</b>';

/** Lines of the headers of every mail, folded ones joined (RFC 5322, section 2.2.3). */
const headers = () =>
	readdirSync(folder)
		.map((name) => readFileSync(join(folder, name), 'utf8').split('\r\n\r\n')[0] ?? '')
		.map((head) => head.replace(/\r\n[ \t]+/g, ' ').split('\r\n'));

describe('line ends in texts', () => {
	it('make no header of a mail, wherever they are typed', async () => {
		const { member, maintainer, anonymous, slug, claim, claimId, task } = world;
		const entered = await member.sendJson('POST', `/api/v1/groups/${slug}/claims`, {
			...claimFields({ printed: '2.8248', bibtex: bibtexOf(980) }),
			locator: `eq. (7)${CRLF}`,
			method: `by hand${CRLF}`,
			note: CRLF
		});
		expect([201, 400]).toContain(entered.status);
		const page = `/g/${slug}/claims/${claim}`;
		const said = await member.submit(`${page}?/comment`, { body: `First${CRLF}` });
		expect(said.status).toBe(303);
		const back = `/g/${slug}/tasks/${task}?/return`;
		expect((await maintainer.submit(back, { reason: `No.${CRLF}` })).status).toBe(200);
		const answer = { name: 'Ilse', email: 'ilse@institute.example', message: `Hello${CRLF}` };
		expect((await anonymous.submit(`/claims/${claimId}/answer`, answer)).status).toBe(303);
		for (const over of [
			{ email: 'ilse@institute.example\r\nBcc: all@evil.example' },
			{ email: 'ilse@institute.example,all@evil.example' },
			{ email: '"x\r\nBcc: all@evil.example"@institute.example' },
			{ email: '<all@evil.example>' },
			{ name: `Ilse${CRLF}` }
		]) {
			const refused = await anonymous.submit(`/claims/${claimId}/answer`, { ...answer, ...over });
			expect(refused.status).toBe(400);
		}
		const mailed = await maintainer.submit(`/g/${slug}/members?/mail`, {
			emails: 'a@elsewhere.example\r\nBcc: all@evil.example',
			role: 'member'
		});
		expect(mailed.status).toBe(400);
		await atRest(server);
		const all = headers();
		expect(all.length).toBeGreaterThan(6);
		for (const lines of all) {
			const names = lines.map((line) => /^([A-Za-z-]+): /.exec(line)?.[1]?.toLowerCase() ?? line);
			expect(names.filter((name) => name === 'bcc' || name === 'cc')).toEqual([]);
			expect(new Set(names).size).toBe(names.length);
			const to = lines.find((line) => line.startsWith('To: ')) ?? '';
			expect(to.match(/@/g)).toHaveLength(1);
			expect(to).not.toContain('evil');
			expect(lines.find((line) => line.startsWith('Content-Type: '))).toContain(
				'multipart/alternative'
			);
		}
	});
});

describe('a link that turns mail off', () => {
	it('works for its own person and kind only, however it is bent', async () => {
		const text = sink
			.caught()
			.map((mail) => mail.text)
			.join('\n');
		const tokens = [...new Set(text.match(/(?<=\/unsubscribe\/)[\w.-]+/g))];
		const owners = new Set(tokens.map((token) => token.split('.')[0]));
		expect(owners.size).toBeGreaterThan(1);
		const [first = ''] = tokens;
		const [user = '', kind = '', code = ''] = first.split('.');
		const other = tokens.find((token) => !token.startsWith(user)) ?? '';
		const [otherUser = '', , otherCode = ''] = other.split('.');
		const bent = [
			`${otherUser}.${kind}.${code}`,
			`${user}.${kind}.${otherCode}`,
			`${user}.digest.${code}`,
			`${user}.mention.${kind === 'mention' ? otherCode : code}`,
			`${user}.${kind}.${code.slice(0, -1)}`,
			`${user}.${kind}.${code}A`,
			`${user}.${kind}.`,
			`${user}.${kind}`,
			`${user}.${kind}.${code}.x`,
			`${user}.__proto__.${code}`,
			`${user.toUpperCase()}.${kind}.${code}`,
			`${user}.${kind}.${code.replace(/.$/, (last) => (last === 'A' ? 'B' : 'A'))}`
		].filter((token) => token !== first);
		const before = await tableDigests(server.databaseUrl, ['sessions']);
		for (const token of bent) {
			const path = `/unsubscribe/${token}`;
			const fields = { 'List-Unsubscribe': 'One-Click' };
			expect([token, (await world.anonymous.get(path)).status]).toEqual([token, 404]);
			expect([token, (await world.anonymous.submit(path, fields)).status]).toEqual([token, 404]);
		}
		expect(await tableDigests(server.databaseUrl, ['sessions'])).toEqual(before);
		expect((await world.anonymous.get(`/unsubscribe/${first}`)).status).toBe(200);
	});
});

describe('limits', () => {
	it('of comments and invitations hold at their number, each for its person', async () => {
		const { owner, maintainer, slug, claim } = world;
		const comment = (i: number) =>
			owner.submit(`/g/${slug}/claims/${claim}?/comment`, { body: `Number ${i}.` });
		for (let i = 1; i <= 60; i++) expect([i, (await comment(i)).status]).toEqual([i, 303]);
		const refused = await comment(61);
		expect(refused.status).toBe(429);
		expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(3_000);
		expect(await refused.text()).toContain('Number 61.');
		// The maintainer’s refused try above counted, too: two addresses.
		const mail = (from: number, many: number) =>
			maintainer.submit(`/g/${slug}/members?/mail`, {
				emails: Array.from({ length: many }, (_, i) => `p${from + i}@elsewhere.example`).join('\n'),
				role: 'observer'
			});
		const spent = 2;
		for (let i = spent; i < 50; i += 7)
			expect((await mail(i, Math.min(7, 50 - i))).status).toBe(200);
		expect((await mail(90, 1)).status).toBe(429);
	});

	it('of authors are not escaped by naming another address', async () => {
		const { anonymous, claimId } = world;
		const statuses: number[] = [];
		for (let i = 0; i < 7; i++) {
			const response = await anonymous.submit(
				`/claims/${claimId}/answer`,
				{ name: 'Ilse', email: 'ilse@institute.example', message: `Message ${i}.` },
				{
					'X-Forwarded-For': `203.0.113.${i}`,
					'X-Real-IP': `203.0.113.${i}`,
					Forwarded: `for=203.0.113.${i}`,
					'True-Client-IP': `203.0.113.${i}`
				}
			);
			statuses.push(response.status);
		}
		// Two were sent before, of five in an hour.
		expect(statuses).toEqual([303, 303, 303, 429, 429, 429, 429]);
	});

	it('of calendars hold at their number, whatever token is tried', async () => {
		let last = 0;
		for (let i = 0; i <= 600; i++) {
			const path = `/calendar/${'x'.repeat(20)}${i}.ics`;
			last = (await world.anonymous.get(path, { 'X-Forwarded-For': `198.51.100.${i % 250}` }))
				.status;
			if (i < 600 && last !== 404) throw new Error(`${i}: ${last}`);
		}
		expect(last).toBe(429);
	});
});
