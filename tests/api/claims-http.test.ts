import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ClaimProgressView, ClaimView, ReadingView } from '../../src/lib/schemas/views';
import { groupOfFour, type GroupOfFour } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import { bibtexOf, claimFields } from '../support/service';
import { Visitor } from '../support/visitor';

let server: TestServer;
let group: GroupOfFour;
let claims: string;
beforeAll(async () => {
	server = await startServer();
	group = await groupOfFour(server, 'Quay Street');
	claims = `/api/v1/groups/${group.slug}/claims`;
});
afterAll(() => server.stop());

const json = async <T>(response: Response): Promise<T> => (await response.json()) as T;

async function enter(fields = claimFields(), by = group.member): Promise<number> {
	const response = await by.sendJson('POST', claims, fields);
	expect(response.status).toBe(201);
	const { number } = await json<{ number: number }>(response);
	expect(response.headers.get('location')).toBe(`${claims}/${number}`);
	return number;
}

/** Reads the claim's events to their end. */
async function follow(number: number): Promise<ClaimProgressView[]> {
	const response = await group.observer.get(`${claims}/${number}/events`);
	expect(response.headers.get('content-type')).toContain('text/event-stream');
	const text = await response.text();
	return text
		.split('\n\n')
		.filter((event) => event.startsWith('event: progress\n'))
		.map((event) => JSON.parse(event.slice(event.indexOf('data: ') + 6)) as ClaimProgressView);
}

const show = async (number: number) =>
	json<ClaimView>(await group.observer.get(`${claims}/${number}`));

describe('a claim over HTTP', () => {
	it('is recomputed in threads while its events tell how far it is', async () => {
		const number = await enter();
		const events = await follow(number);
		expect(events[0]?.settled).toBe(false);
		expect(events.at(-1)).toMatchObject({ settled: true, verdict: { status: 'agreement' } });
		const claim = await show(number);
		expect(claim.recomputations.length).toBeGreaterThanOrEqual(8);
		expect(claim.recomputations.every(({ checked }) => checked)).toBe(true);
	});

	it('gives its certificates to download and check again', async () => {
		const number = await enter(claimFields({ quantity: 'almost-quantum' }));
		await follow(number);
		const { recomputations } = await show(number);
		for (const { id, label, hasSdpa } of recomputations) {
			const download = await group.observer.get(`/api/v1/recomputations/${id}/result`);
			expect(download.headers.get('content-disposition')).toContain('attachment');
			expect(await json(download)).toMatchObject({ format: 1, status: 'done' });
			const check = await group.observer.sendJson('POST', `/api/v1/recomputations/${id}/check`);
			expect(await json(check), label).toMatchObject({ checked: true });
			const sdpa = await group.observer.get(`/api/v1/recomputations/${id}/sdpa`);
			expect(sdpa.status).toBe(hasSdpa ? 200 : 404);
			if (hasSdpa) expect(await sdpa.text()).toMatch(/^["*]|^\d+/);
		}
		const [first] = recomputations;
		for (const nobody of [group.anonymous, group.outsider]) {
			for (const path of ['', '/result', '/sdpa']) {
				const answer = await nobody.get(`/api/v1/recomputations/${first?.id}${path}`);
				expect(answer.status).toBe(404);
			}
		}
	});

	it('that disagrees is mailed over SMTP', async () => {
		const number = await enter(claimFields({ printed: '2.8248', bibtex: bibtexOf(4) }));
		await follow(number);
		for (let i = 0; i < 100 && server.mail.caught().length < 3; i++) {
			await new Promise((resolve) => setTimeout(resolve, 100));
		}
		const mails = server.mail.caught();
		expect(mails).toHaveLength(3);
		expect(mails[0]?.text).toContain(`${server.origin}/g/${group.slug}/claims/${number}`);
	});

	it('is answered with 304 when nothing has changed', async () => {
		const number = await enter();
		await follow(number);
		const first = await group.observer.get(`${claims}/${number}`);
		const tag = first.headers.get('etag') ?? '';
		const second = await group.observer.get(`${claims}/${number}`, { 'If-None-Match': tag });
		expect(tag).not.toBe('');
		expect(second.status).toBe(304);
	});

	it('is refused as problem details that name the field', async () => {
		const response = await group.member.sendJson('POST', claims, {
			...claimFields(),
			subjectKind: 'expression',
			expression: 'A0 B0 + ?'
		});
		expect(response.status).toBe(400);
		expect(response.headers.get('content-type')).toContain('application/problem+json');
		expect(await json(response)).toMatchObject({
			status: 400,
			errors: [{ field: 'expression', position: 8 }]
		});
	});

	it('is refused when the body is too long, no JSON, or of another group', async () => {
		const long = { ...claimFields(), note: 'x'.repeat(400_000) };
		expect((await group.member.sendJson('POST', claims, long)).status).toBe(413);
		const form = await group.member.submit(claims, { printed: '2' });
		expect(form.status).toBe(400);
		expect((await group.outsider.sendJson('POST', claims, claimFields())).status).toBe(404);
		expect((await group.observer.sendJson('POST', claims, claimFields())).status).toBe(403);
		expect((await group.anonymous.sendJson('POST', claims, claimFields())).status).toBe(401);
	});

	it('on another group’s number is not there', async () => {
		const number = await enter();
		const theirs = `/api/v1/groups/${group.outsiderSlug}/claims/${number}`;
		for (const path of ['', '/progress', '/events']) {
			expect((await group.outsider.get(`${claims}/${number}${path}`)).status).toBe(404);
			expect((await group.outsider.get(`${theirs}${path}`)).status).toBe(404);
		}
	});
});

describe('the pages of a claim', () => {
	it('name a wrong number at its field, and open the form to those who may edit', async () => {
		const number = await enter(claimFields(), group.maintainer);
		const page = `/g/${group.slug}/claims/${number}`;
		for (const by of ['999', String(number), 'x', '']) {
			const answer = await group.maintainer.submit(`${page}?/supersede`, { by });
			expect(answer.status).toBe(400);
			expect(await answer.text()).toContain('supersede-wrong');
		}
		expect((await group.member.get(`${page}/edit`)).status).toBe(403);
		expect((await group.maintainer.get(`${page}/edit`)).status).toBe(200);
	});
});

describe('a reading', () => {
	it('says what is understood of a half-filled form', async () => {
		const response = await group.observer.sendJson('POST', '/api/v1/readings', {
			group: group.slug,
			subjectKind: 'expression',
			expression: 'A1 B1 + A1 B2 + A2 B1 - A2 B2',
			quantity: 'quantum',
			printed: '2.8284'
		});
		expect(response.status).toBe(200);
		const reading = await json<ReadingView>(response);
		expect(reading).toMatchObject({
			scenario: '2 parties, 2 inputs each, 2 outputs',
			indexBase: { base: 1, chosen: false },
			knownAs: { name: 'CHSH', map: null },
			value: 'Read as 2.82835 to 2.82845',
			issues: []
		});
		expect(reading.formulaHtml).toContain('<math');
	});

	it('says nothing of what is still empty, and of two papers at once', async () => {
		const read = async (fields: object) =>
			json<ReadingView>(
				await group.member.sendJson('POST', '/api/v1/readings', { group: group.slug, ...fields })
			);
		const blank = { subjectKind: 'expression', expression: ' ', printed: '', bibtex: '' };
		expect((await read(blank)).issues).toEqual([]);
		const two = await read({ bibtex: `${bibtexOf(1)}\n@misc{b, title = {B` });
		expect(two.issues).toMatchObject([
			{ field: 'bibtex', message: expect.stringContaining('a second entry starts here') as unknown }
		]);
	});

	it('names a field that is too long and reads the others', async () => {
		const response = await group.member.sendJson('POST', '/api/v1/readings', {
			group: group.slug,
			...claimFields({ dimension: 'x'.repeat(100) })
		});
		const reading = await json<ReadingView>(response);
		expect(reading.issues).toMatchObject([{ field: 'dimension' }]);
		expect(reading.reference).toContain('Arden, M., & Voss, T. (2004)');
	});
});

describe('a crash', () => {
	it('loses nothing: what ran is queued again at the next start', async () => {
		const first = await startServer();
		const before = await groupOfFour(first, 'Before the crash');
		const path = `/api/v1/groups/${before.slug}/claims`;
		const cglmp = claimFields({ family: 'cglmp', familyParameter: '3', printed: '2.9149' });
		expect((await before.member.sendJson('POST', path, cglmp)).status).toBe(201);
		await first.kill();
		const second = await startServer({ folder: first.folder });
		try {
			const member = new Visitor(second);
			for (const [name, value] of before.member.cookies) member.cookies.set(name, value);
			let view: ClaimProgressView | undefined;
			for (let i = 0; i < 300 && !view?.settled; i++) {
				view = await json<ClaimProgressView>(await member.get(`${path}/1/progress`));
				await new Promise((resolve) => setTimeout(resolve, 200));
			}
			// Acin, Durt, Gisin, Latorre 2002 give 1 + sqrt(11/3) = 2.9149 for d = 3.
			expect(view).toMatchObject({ settled: true, verdict: { status: 'agreement' } });
		} finally {
			await second.stop();
		}
	});
});
