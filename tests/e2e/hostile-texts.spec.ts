import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { simpleParser } from 'mailparser';
import { XSS_PAYLOADS } from '../../src/lib/server/markdown/xss-payloads';
import { CONFIRMED, enterDiscrepancy, handIn } from '../support/hostile-world';
import { newPerson, startGroup } from '../support/people';
import { startServer, type TestServer } from '../support/server';
import type { Fields, Visitor } from '../support/visitor';
import { lookUp } from '../support/whole-database';

/**
 * Markup and script in every text that this product shows, looked at in a browser: nothing runs,
 * nothing is put into a page, nothing is fetched. Every payload calls `steal()`, which tells.
 */
const MARK = `"'><img src=x onerror=steal()><script>steal()</script>`;
const SHORT = '<img src=x onerror=steal()>';
/** Of a spreadsheet: what a cell must not begin with. */
const FORMULA = '=HYPERLINK("https://evil.example/","x")';

let server: TestServer;
/** Its mail is kept beside its database and shown at /demo/mail. */
test.beforeAll(async () => {
	server = await startServer({ env: { MERESTONE_DEMO: '1', SMTP_URL: '' } });
});
test.afterAll(() => server.stop());

const look = (sql: string) => lookUp(server.databaseUrl, sql);

async function done(response: Response, what: string): Promise<Response> {
	if (response.status < 400) return response;
	throw new Error(`${what}: ${response.status} ${(await response.text()).slice(0, 1_500)}`);
}

/** Every text there is, filled with markup; the addresses to look at. */
async function fill(owner: Visitor): Promise<{ pages: string[]; visitor: string[]; slug: string }> {
	const slug = await startGroup(owner, `Group ${MARK}`);
	const at = `/g/${slug}`;
	const send = async (who: Visitor, path: string, fields: Fields) =>
		done(await who.submit(path, fields), path);
	const settings = await (await owner.get(`${at}/settings`)).text();
	const version = /name="version"[^>]*value="([^"]*)"/.exec(settings)?.[1] ?? '';
	const words = { name: `Group ${MARK}`, description: `About ${MARK}`, version };
	await send(owner, `${at}/settings?/save`, { ...words, slug });
	await send(owner, `${at}/members?/mail`, { emails: 'guest@slate.example', role: 'maintainer' });
	await expect
		.poll(() => look("SELECT count(*) FROM outbox WHERE kind = 'invitation' AND state = 'sent'"))
		.toBe('1');
	const link = /\/join\/[\w-]{20,}/.exec(mails().join('\n'))?.[0] ?? '';
	const guest = await newPerson(server, { name: FORMULA, email: 'guest@slate.example' });
	const joinPage = await (await guest.get(link)).text();
	expect(joinPage).toContain('&lt;img src=x');
	await send(guest, link, {});

	const claim = await enterDiscrepancy(owner, slug, 970, {
		method: MARK,
		locator: MARK,
		note: MARK,
		bibtex: `@article{a, author={Arden, Mira}, title={On ${MARK}}, journal={${SHORT}}, year={2004}, doi={10.5555/xss}}`
	});
	const described = await done(
		await owner.sendJson('POST', `/api/v1/groups/${slug}/claims`, {
			subjectKind: 'described',
			described: MARK,
			quantity: 'visibility',
			printed: '0.7071',
			locator: FORMULA,
			method: FORMULA,
			paper: 'bibtex',
			bibtex: '@article{b, author={Voss, Tam}, title={B}, year={2005}, doi={10.5555/b}}'
		}),
		'a described claim'
	);
	const { number } = (await described.json()) as { number: number };
	const page = `${at}/claims/${claim.number}`;
	for (let i = 0; i < XSS_PAYLOADS.length; i += 15) {
		const body = XSS_PAYLOADS.slice(i, i + 15).join('\n\n');
		await send(guest, `${page}?/comment`, { body });
	}
	await send(guest, `${page}?/confirm`, {
		...CONFIRMED,
		valueMatches: 'no',
		note: MARK,
		version: '1'
	});
	await send(guest, `${page}?/confirm`, { ...CONFIRMED, version: '1' });
	await send(guest, `${page}?/publish`, {});
	await send(owner, `${page}?/attachNotice`, {
		kind: 'erratum',
		note: MARK,
		bibtex: `@article{c, author={Arden, Mira}, title={Erratum ${MARK}}, year={2006}, doi={10.5555/c}}`
	});
	await send(guest, `/claims/${claim.id}/answer`, {
		name: SHORT,
		email: `"<b>x</b>"@institute.example`.replaceAll(/["<>/]/g, ''),
		message: `${MARK}\n${SHORT}`,
		link: `https://institute.example/?${encodeURI(SHORT)}`
	});
	const opened = await send(owner, `${at}/tasks/new?/open`, {
		claims: String(number),
		kind: 'recompute',
		dueOn: new Date(Date.now() + 30 * 86_400_000).toISOString().slice(0, 10),
		instructions: `${MARK}\n\n${XSS_PAYLOADS.slice(0, 20).join('\n\n')}`,
		assigneeId: await look(`SELECT id FROM users WHERE email = 'guest@slate.example'`)
	});
	const task = opened.headers.get('location') ?? '';
	const found = { kind: 'value', printed: '0.70711', program: MARK, programVersion: SHORT };
	const more = { method: MARK, comment: `${MARK}\n\n[x](javascript:steal())` };
	const files = [
		[`${MARK}.txt`, '<script>steal()</script>'],
		['\u202egpj.exe.txt', 'x'],
		['../../../etc/cron.d/x.txt', 'x']
	] as const;
	await done(await handIn(guest, task, { ...found, ...more }, files), 'submitting');
	await send(owner, `${task}?/return`, { reason: MARK });
	await done(await handIn(guest, task, { ...found, ...more }, []), 'submitting again');
	await send(owner, `${task}?/accept`, {});
	await send(owner, `${task}?/comment`, { body: `@${FORMULA} ${MARK}` });
	const cancelled = await send(owner, `${at}/tasks/new?/open`, { claims: String(number) });
	await send(owner, `${cancelled.headers.get('location') ?? ''}?/cancel`, { reason: MARK });
	const { inequalityId } = claim.subject;
	await send(guest, `${at}/inequalities/${inequalityId}?/comment`, { body: MARK });
	await expect.poll(() => look("SELECT count(*) FROM outbox WHERE state = 'waiting'")).toBe('0');
	const query = encodeURIComponent(MARK);
	return {
		slug,
		pages: [
			...[at, `${at}?q=${query}`, page, `${page}/edit`, `${at}/claims/${number}`, task],
			...[`${at}/tasks?state=all`, `${at}/tasks?view=board&state=all`, `${at}/tasks?q=${query}`],
			...[`${at}/tasks/new?claims=${number}&claims=${query}`, `${at}/activity`],
			...[`${at}/activity?kind=${query}`, `${at}/members`, `${at}/settings`, `${at}/references`],
			...[`${at}/inequalities`, `${at}/inequalities/${inequalityId}`, `${at}/claims/new`],
			...['/home', '/home/tasks', '/news', '/account', '/account/notifications'],
			...[`/g/${encodeURIComponent(SHORT)}`, `${at}/tasks/${query}`, '/demo/mail', '/admin/mail']
		],
		visitor: [
			...[
				'/',
				`/claims/${claim.id}`,
				`/claims/${claim.id}/answer`,
				`/inequalities/${inequalityId}`
			],
			...[
				`/?q=${query}`,
				`/sign-in?next=${query}`,
				`/sign-in?next=javascript:steal()`,
				`/${query}`
			],
			...[`/references/${claim.reference.id}`, link, `/unsubscribe/${query}`]
		]
	};
}

const folder = () => join(server.folder, 'mail');
const mails = () =>
	readdirSync(folder()).map((name) =>
		readFileSync(join(folder(), name), 'utf8').replaceAll('=\r\n', '')
	);

/** What must not happen in a page; `trouble` is what did. */
async function watched(browser: Browser, visitor: Visitor | null): Promise<[Page, string[]]> {
	const context = await browser.newContext();
	const trouble: string[] = [];
	if (visitor) {
		const cookies = [...visitor.cookies].map(([name, value]) => ({
			name,
			value,
			url: server.origin
		}));
		await context.addCookies(cookies);
	}
	await context.exposeFunction('steal', () => trouble.push('steal() ran'));
	await context.addInitScript(() => {
		addEventListener('securitypolicyviolation', ({ violatedDirective, blockedURI }) =>
			console.error(`refused by the policy: ${violatedDirective} ${blockedURI}`)
		);
	});
	const page = await context.newPage();
	page.on('dialog', (dialog) => {
		trouble.push('a dialog');
		void dialog.dismiss();
	});
	page.on('console', (message) => {
		const text = message.text();
		if (/policy/i.test(text)) trouble.push(`${new URL(page.url()).pathname} ${text}`);
	});
	page.on('request', (request) => {
		const url = new URL(request.url());
		if (url.protocol.startsWith('http') && url.origin !== server.origin) trouble.push(url.href);
		if (url.pathname === '/x' || url.pathname.endsWith('/x')) trouble.push(`fetched ${url.href}`);
	});
	return [page, trouble];
}

/** Elements and attributes that no page of ours has. */
function injected(page: Page): Promise<string[]> {
	return page.evaluate(() =>
		[...document.querySelectorAll('*')].flatMap((element) => {
			const tag = element.localName;
			const handler = element.getAttributeNames().some((name) => /^on/.test(name));
			const address = ['href', 'src', 'action', 'formaction', 'xlink:href']
				.map((name) => element.getAttribute(name) ?? '')
				.find((value) => /^\s*(javascript|data:text|vbscript|blob):?/i.test(value));
			const foreign = /^(iframe|object|embed|base|marquee|video|audio|mglyph|template)$/.test(tag);
			const image = tag === 'img' && element.getAttribute('src') === 'x';
			return handler || address || foreign || image ? [element.outerHTML.slice(0, 200)] : [];
		})
	);
}

test('markup in any text stays text', async ({ browser }) => {
	test.setTimeout(300_000);
	const owner = await newPerson(server, { name: `Ada ${SHORT}` });
	const { pages, visitor, slug } = await fill(owner);
	await test.step('on every page, signed in and not', async () => {
		for (const [who, paths] of [
			[owner, pages],
			[null, visitor]
		] as const) {
			const [page, trouble] = await watched(browser, who);
			for (const path of paths) {
				await page.goto(`${server.origin}${path}`, { waitUntil: 'load' });
				// Everything that is folded away, too.
				await page.evaluate(() => {
					for (const details of document.querySelectorAll('details')) details.open = true;
				});
				await page.mouse.move(300, 300);
				expect([path, await injected(page)]).toEqual([path, []]);
			}
			await page.waitForTimeout(300);
			expect(trouble).toEqual([]);
			await page.context().close();
		}
	});

	await test.step('in every mail', async () => {
		const [page, trouble] = await watched(browser, null);
		const caught = readdirSync(folder());
		expect(caught.length).toBeGreaterThan(6);
		for (const name of caught) {
			const raw = readFileSync(join(folder(), name));
			const mail = await simpleParser(raw, { skipHtmlToText: true });
			expect(mail.html).toBeTruthy();
			// A header is one line, and there is one recipient.
			expect([mail.to].flat()).toHaveLength(1);
			expect(mail.headers.has('bcc')).toBe(false);
			expect(mail.subject).not.toMatch(/[\r\n]/);
			await page.setContent(String(mail.html));
			expect([
				name,
				await injected(page),
				await page.locator('img, script, link, iframe').count()
			]).toEqual([name, [], 0]);
		}
		expect(trouble).toEqual([]);
		await page.context().close();
	});

	await test.step('in files for a spreadsheet', async () => {
		for (const name of ['ledger.csv', 'activity.csv']) {
			const text = await (await owner.get(`/g/${slug}/${name}`)).text();
			expect(text).toContain('"\'=HYPERLINK');
			const cells = [...text.matchAll(/(?:^|,|\r\n)(?:"((?:[^"]|"")*)"|([^",\r\n]*))/g)];
			expect(cells.length).toBeGreaterThan(20);
			const live = cells
				.map(([, quoted, plain]) => quoted ?? plain ?? '')
				.filter(
					(cell) => /^[=+\-@\t\r\0]/.test(cell) && cell !== '=' && Number.isNaN(Number(cell))
				);
			expect([name, live]).toEqual([name, []]);
		}
	});
});
