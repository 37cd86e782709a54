import { createClient } from '@libsql/client';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ClaimView, PublicClaimView } from '../../src/lib/schemas/views';
import { groupOfFour, type GroupOfFour } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { bibtexOf, claimFields } from '../support/service';

let server: TestServer;
let group: GroupOfFour;
/** A published discrepancy, confirmed by a second person. */
let claim: ClaimView;
let answerPath: string;

beforeAll(async () => {
	// The limits as they are in production, not times a thousand as other tests have them.
	server = await startServer({ env: { MERESTONE_RATE_FACTOR: '1' } });
	group = await groupOfFour(server, 'Quoin Lane');
	claim = await publishedDiscrepancy(1);
	answerPath = `/claims/${claim.id}/answer`;
});
afterAll(() => server.stop());

const json = async <T>(response: Response): Promise<T> => (await response.json()) as T;

/** CHSH's quantum maximum with two digits swapped; 2 sqrt 2 = 2.828427... by Tsirelson (1980). */
async function publishedDiscrepancy(paper: number): Promise<ClaimView> {
	const api = `/api/v1/groups/${group.slug}/claims`;
	const fields = claimFields({ printed: '2.8248', bibtex: bibtexOf(paper) });
	const entered = await json<{ number: number }>(await group.member.sendJson('POST', api, fields));
	await (await group.member.get(`${api}/${entered.number}/events`)).text();
	const page = `/g/${group.slug}/claims/${entered.number}`;
	const early = await group.maintainer.submit(`${page}?/publish`);
	expect(early.status).toBe(409);
	expect(await early.text()).toContain('compared value, locator and inequality with the paper');
	const confirmed = await group.owner.submit(`${page}?/confirm`, {
		valueMatches: 'yes',
		locatorMatches: 'yes',
		inequalityMatches: 'yes',
		version: '1'
	});
	expect(confirmed.status).toBe(200);
	expect((await group.maintainer.submit(`${page}?/publish`)).status).toBe(200);
	return json<ClaimView>(await group.member.get(`${api}/${entered.number}`));
}

const MESSAGE = {
	name: 'Ilse Corvin',
	email: 'ilse@institute.example',
	message: 'Eq. (7) has two digits swapped.\n<script>alert(1)</script><img src=x onerror=alert(2)>',
	link: 'https://institute.example/erratum'
};

async function stored(): Promise<number> {
	const client = createClient({ url: server.databaseUrl });
	const { rows } = await client.execute('SELECT count(*) AS n FROM author_messages');
	client.close();
	return Number(rows[0]?.n);
}

const groupPage = async (who: 'maintainer' | 'member' | 'observer') =>
	(await group[who].get(`/g/${group.slug}/claims/${claim.number}`)).text();

describe('the form for authors', () => {
	it('is offered on the public page, beside what the verdict means', async () => {
		const page = await (await group.anonymous.get(`/claims/${claim.id}`)).text();
		expect(page).toContain('Does not reproduce as entered');
		expect(page).toContain('compared with the paper by a second person of the group');
		expect(page).toContain(`href="${answerPath}"`);
		const form = await (await group.anonymous.get(answerPath)).text();
		expect(form).toContain('Answer as an author');
		expect(form).toMatch(/<textarea[^>]*name="message"/);
	});

	it.each([
		['name', { name: 'Ilse\r\nBcc: everyone@elsewhere.example' }],
		['name', { name: 'Ilse\nSubject: buy' }],
		['email', { email: 'ilse@institute.example\r\nBcc: everyone@elsewhere.example' }],
		['email', { email: 'ilse@institute.example, other@elsewhere.example' }],
		['message', { message: '  ' }],
		['link', { link: 'javascript:alert(1)' }]
	] as const)('refuses a wrong %s and keeps what was typed', async (field, over) => {
		const response = await group.anonymous.submit(answerPath, { ...MESSAGE, ...over });
		expect(response.status).toBe(400);
		const page = await response.text();
		expect(page).toContain(`id="${field}-error"`);
		expect(page).toContain(field === 'message' ? 'value="Ilse Corvin"' : 'two digits swapped');
		expect(page).not.toContain('<script>alert(1)');
		expect(await stored()).toBe(0);
	});

	it('thanks a program that fills in everything, and keeps nothing', async () => {
		const response = await group.anonymous.submit(answerPath, { ...MESSAGE, remark: 'hello' });
		expect(response.status).toBe(303);
		expect(response.headers.get('location')).toBe(`${answerPath}?sent=1`);
		expect(await stored()).toBe(0);
	});

	it('takes five messages an hour from one address, whoever is signed in; the sixth keeps its text', async () => {
		for (const who of ['anonymous', 'anonymous', 'outsider', 'member', 'anonymous'] as const) {
			const response = await group[who].submit(answerPath, MESSAGE);
			expect(response.status).toBe(303);
			const thanks = await group[who].get(response.headers.get('location') ?? '');
			expect(await thanks.text()).toContain('Thank you');
		}
		const refused = await group.anonymous.submit(answerPath, MESSAGE);
		expect(refused.status).toBe(429);
		const wait = Number(refused.headers.get('retry-after'));
		expect(wait).toBeGreaterThan(3_500);
		expect(wait).toBeLessThanOrEqual(3_600);
		expect(await refused.text()).toContain('two digits swapped');
		expect(await stored()).toBe(5);
	});

	it('shows messages to maintainers only, as text', async () => {
		const page = await groupPage('maintainer');
		expect(page).toContain('two digits swapped');
		expect(page).toMatch(/&(lt|#x3C);script>alert\(1\)/);
		expect(page).not.toMatch(/<script>alert\(1\)|<img src=x/);
		for (const who of ['member', 'observer'] as const) {
			expect(await groupPage(who)).not.toMatch(/two digits swapped|ilse@institute/);
		}
	});

	it('mails them to maintainers and owners, with nobody else among the recipients', async () => {
		const mails = () => server.mail.caught().filter(({ text }) => text.includes('digits swapped'));
		for (let i = 0; i < 200 && mails().length < 10; i++) {
			await new Promise((resolve) => setTimeout(resolve, 100));
		}
		expect(mails()).toHaveLength(10);
		expect(new Set(mails().map(({ to }) => to)).size).toBe(2);
		expect(mails().map(({ subject }) => subject)).toEqual(
			mails().map(() => expect.stringContaining('An author answers'))
		);
	});

	it('leaves nothing on public pages: no message, no name, no address, nobody of the group', async () => {
		const paths = [
			`/claims/${claim.id}`,
			`/claims/${claim.id}/__data.json`,
			`${answerPath}/__data.json`,
			`/api/v1/claims/${claim.id}`,
			`/inequalities/${claim.subject.inequalityId}`,
			`/references/${claim.reference.id}`,
			'/',
			'/api/v1/bounds'
		];
		for (const path of paths) {
			const response = await group.anonymous.get(path);
			expect(response.status, path).toBe(200);
			expect(await response.text(), path).not.toMatch(
				/digits swapped|Ilse Corvin|ilse@|Reader \d|@group\.example/
			);
		}
		const shown = await json<PublicClaimView>(
			await group.anonymous.get(`/api/v1/claims/${claim.id}`)
		);
		expect(shown.wording).toMatch(/^It does not reproduce as entered\. .* by a second person/);
		expect(shown.history.every(({ who }) => who === null)).toBe(true);
	});

	it('is gone with the claim’s publication', async () => {
		const page = `/g/${group.slug}/claims/${claim.number}`;
		const unsaid = await group.owner.submit(`${page}?/confirm`, {
			valueMatches: 'no',
			locatorMatches: 'yes',
			inequalityMatches: 'yes',
			version: '1'
		});
		expect(unsaid.status).toBe(400);
		const again = await unsaid.text();
		expect(again).toContain('id="comparison-note-error"');
		expect(again).toMatch(/name="valueMatches" value="no"[^>]*checked/);
		const disputed = await group.owner.submit(`${page}?/confirm`, {
			valueMatches: 'no',
			locatorMatches: 'yes',
			inequalityMatches: 'yes',
			note: 'It prints 2.8284.',
			version: '1'
		});
		expect(disputed.status).toBe(200);
		expect((await group.anonymous.get(answerPath)).status).toBe(404);
		expect((await group.anonymous.get(`/claims/${claim.id}`)).status).toBe(404);
		expect(await groupPage('maintainer')).toContain('hidden from everyone else');
	});
});
