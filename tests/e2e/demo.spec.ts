import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { DEMO_PASSWORD, GROUP } from '../../seed/people';
import { TASK_STATES } from '../../src/lib/ledger/tasks';
import type { TaskRow } from '../../src/lib/schemas/task-views';
import type { BoundsRow, LedgerRow } from '../../src/lib/schemas/views';
import { startServer, type TestServer } from '../support/server';

/** The demo as it is shipped: seeded by really running the solvers, then looked at page by page. */
const SEED_LIMIT_MS = 300_000;
const WIDTHS = [1440, 360] as const;
const SCHEMES = ['light', 'dark'] as const;

let server: TestServer;
test.beforeAll(async () => {
	test.setTimeout(SEED_LIMIT_MS + 60_000);
	const folder = mkdtempSync(join(tmpdir(), 'merestone-demo-'));
	const env = {
		...process.env,
		MERESTONE_DEMO: '1',
		MERESTONE_LOG: 'error',
		DATABASE_URL: `file:${join(folder, 'test.db')}`
	};
	const seeded = spawnSync(
		process.execPath,
		['node_modules/tsx/dist/cli.mjs', 'seed/seed.ts', join(folder, 'seeded')],
		{ env, encoding: 'utf8', timeout: SEED_LIMIT_MS }
	);
	if (seeded.status !== 0) throw new Error(`The seed failed:\n${seeded.stdout}\n${seeded.stderr}`);
	const administrator = readFileSync(join(folder, 'seeded'), 'utf8').trim();
	const demo = { MERESTONE_DEMO: '1', MERESTONE_ADMINS: administrator };
	server = await startServer({ folder, env: demo });
});
test.afterAll(async () => {
	await server.stop();
});

async function signIn(page: Page, email: string): Promise<void> {
	await page.goto(`${server.origin}/sign-in?next=/g/${GROUP.slug}`);
	await page.getByLabel('E-mail address').fill(email);
	await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD);
	await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL((url) => url.pathname === `/g/${GROUP.slug}`);
}

/** No violation of WCAG 2.2 AA that axe finds, and nothing that scrolls sideways. */
async function lookAt(page: Page, path: string): Promise<void> {
	await page.goto(server.origin + path);
	for (const width of WIDTHS) {
		await page.setViewportSize({ width, height: 900 });
		for (const colorScheme of SCHEMES) {
			await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' });
			await page.waitForTimeout(100);
			const { violations } = await new AxeBuilder({ page })
				.withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
				.analyze();
			const found = violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html ?? ''}`);
			expect(found, `${path} at ${width} px, ${colorScheme}`).toEqual([]);
		}
		const overflow = await page.evaluate(
			() => document.documentElement.scrollWidth - document.documentElement.clientWidth
		);
		expect(overflow, `${path} scrolls sideways at ${width} px`).toBeLessThanOrEqual(0);
	}
}

async function ledgerOf(page: Page): Promise<readonly LedgerRow[]> {
	const numbers = Array.from({ length: 99 }, (_, i) => i + 1).join(',');
	const response = await page.request.get(
		`${server.origin}/api/v1/groups/${GROUP.slug}/claims?numbers=${numbers}`
	);
	expect(response.ok()).toBe(true);
	return ((await response.json()) as { items: LedgerRow[] }).items;
}

test('the seed shows each status, each reason for Open and each diagnosis', async ({ page }) => {
	await signIn(page, 'ines@harrow.example');
	const rows = await ledgerOf(page);
	const reasons = new Set(rows.map(({ verdict }) => verdict.reasonCode));
	for (const reason of ['within', 'proved', 'above-upper-bound', 'below-lower-bound'] as const)
		expect(reasons).toContain(reason);
	for (const reason of ['no-solver', 'failed', 'not-settled', 'last-digits'] as const)
		expect(reasons).toContain(reason);
	const kinds = new Set(
		rows.flatMap(({ verdict }) => verdict.diagnosis.slice(0, 1).map(({ kind }) => kind))
	);
	expect([...kinds].sort()).toEqual([
		'complement',
		'digit-missing',
		'digit-mistyped',
		'digits-swapped',
		'index-base',
		'other-normalisation',
		'other-quantity',
		'percent',
		'relation-reversed',
		'sign',
		'solver-tolerance',
		'truncated'
	]);
});

test('the seed shows tasks in every state, talk, and what became of it', async ({ page }) => {
	await signIn(page, 'ines@harrow.example');
	const group = `${server.origin}/api/v1/groups/${GROUP.slug}`;
	const { items } = (await (await page.request.get(`${group}/tasks?state=all`)).json()) as {
		items: TaskRow[];
	};
	expect(new Set(items.map(({ state }) => state))).toEqual(new Set(TASK_STATES));
	expect(items.some(({ overdue }) => overdue)).toBe(true);
	const reproduced = (await ledgerOf(page)).find(
		({ quantityLabel }) => quantityLabel === 'Key rate'
	);
	expect(reproduced?.verdict.status).toBe('agreement');
	expect(reproduced?.verdict.enclosure?.worth).toBe('person');
	const contradicted = items.find(({ reason }) => reason.startsWith('Contradicts the certificate'));
	expect(contradicted?.state).toBe('returned');
	await page.goto(`${server.origin}/g/${GROUP.slug}/activity?kind=talk`);
	await expect(page.getByText(/commented on claim/).first()).toBeVisible();
});

test('public pages are accessible, at both widths and in both modes', async ({ page }) => {
	test.setTimeout(300_000);
	const bounds = await page.request.get(`${server.origin}/api/v1/bounds`);
	const { items: rows } = (await bounds.json()) as { items: BoundsRow[] };
	const claim = rows.map((row) => row.claimedLower ?? row.claimedUpper).find((found) => found);
	const paths = ['/', '/method', '/sign-in', '/sign-up', '/no-such-page', '/demo/mail'];
	paths.push(`/inequalities/${rows[0]?.inequality.id}`, `/claims/${claim?.claimId}`);
	paths.push(`/claims/${claim?.claimId}/answer`);
	for (const path of paths) await lookAt(page, path);
});

test('a group’s pages are accessible, at both widths and in both modes', async ({ page }) => {
	test.setTimeout(600_000);
	await signIn(page, 'ines@harrow.example');
	const base = `/g/${GROUP.slug}`;
	const rows = await ledgerOf(page);
	const inequality = rows.find(({ subject }) => subject.inequalityId)?.subject.inequalityId;
	const discrepancy = rows.find(({ verdict }) => verdict.status === 'discrepancy');
	const caution = rows.find(({ quantityLabel }) => /efficiency/i.test(quantityLabel));
	const paths = [
		base,
		`${base}?q=nothing-like-this`,
		`${base}/claims/new`,
		`${base}/claims/${discrepancy?.number}`,
		`${base}/claims/${caution?.number}`,
		`${base}/claims/1/edit`,
		`${base}/inequalities`,
		`${base}/inequalities/${inequality}`,
		`${base}/references`,
		`${base}/references/${rows[0]?.reference.id}`,
		`${base}/members`,
		`${base}/tasks`,
		`${base}/tasks?view=board`,
		`${base}/tasks/1`,
		`${base}/tasks/new?claims=1`,
		`${base}/activity`,
		`${base}/settings`,
		'/home',
		'/home/tasks',
		'/news',
		'/account/notifications',
		'/admin/mail',
		'/account',
		'/groups/new'
	];
	for (const path of paths) await lookAt(page, path);
});

test('the ledger filters, sorts and pages by its address, without JavaScript too', async ({
	browser
}) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await signIn(page, 'wren@harrow.example');
	await page.goto(`${server.origin}/g/${GROUP.slug}?status=discrepancy&sort=value`);
	const badges = page.getByRole('table').getByText('Discrepancy');
	expect(await badges.count()).toBeGreaterThan(5);
	await expect(page.getByRole('table').getByText('Agreement')).toHaveCount(0);
	await page.goto(`${server.origin}/g/${GROUP.slug}?q=10.5555%2Flfp.2015.0009`);
	await expect(page.getByRole('table').getByText('Osk 2015').first()).toBeVisible();
	await expect(page.getByRole('table').getByText('Arlen')).toHaveCount(0);
	await context.close();
});

test('the main form works without JavaScript and loses nothing on an error', async ({
	browser
}) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await signIn(page, 'wren@harrow.example');
	await page.goto(`${server.origin}/g/${GROUP.slug}/claims/new`);
	await page.locator('[name=subjectKind][value=expression]').check({ force: true });
	await page.locator('[name=expression]').fill('A0 B0 + A0 B1 + A1 B0 - A1 B%');
	await page.locator('[name=printed]').fill('2');
	await page.locator('[name=quantity]').selectOption('local');
	await page.locator('[name=locator]').fill('eq. (1)');
	await page
		.locator('[name=bibtex]')
		.fill('@article{x1, author={Stone, A.}, title={T}, year={2001}}');
	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	await expect(page.locator('[name=expression]')).toHaveValue('A0 B0 + A0 B1 + A1 B0 - A1 B%');
	await expect(page.locator('[name=printed]')).toHaveValue('2');
	await expect(page.getByText(/position|character/i).first()).toBeVisible();
	await page.locator('[name=expression]').fill('A0 B0 + A0 B1 + A1 B0 - A1 B1');
	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	await page.waitForURL(/\/claims\/\d+$/);
	await expect(page.getByText('Agreement').first()).toBeVisible();
	await context.close();
});
