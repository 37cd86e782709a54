import { expect, test, type Page } from '@playwright/test';
import { startServer, type TestServer } from '../support/server';

/** A session that ends while a claim is typed costs nothing of what was typed. */
let server: TestServer;
test.beforeAll(async ({ browser }) => {
	server = await startServer();
	const page = await browser.newPage();
	await page.goto(`${server.origin}/sign-up?next=/groups/new`);
	await page.getByLabel('Name').fill('Ada Merrin');
	await page.getByLabel('E-mail address').fill(EMAIL);
	await page.getByLabel('Password', { exact: true }).fill(PASSWORD);
	await page.getByRole('button', { name: 'Sign up' }).click();
	await page.waitForURL((url) => url.pathname === '/groups/new');
	await page.getByLabel('Name').fill('Quarry group');
	await page.locator('main').getByRole('button', { name: /start/i }).click();
	await page.waitForURL((url) => url.pathname === GROUP);
	await page.close();
});
test.afterAll(async () => {
	await server.stop();
});

const EMAIL = 'ada@quarry.example';
const PASSWORD = 'granite granite slate';
const GROUP = '/g/quarry-group';

// CHSH, 2 sqrt 2: B. S. Cirel'son, Lett. Math. Phys. 4, 93 (1980).
const EXPRESSION = 'A0 B0 + A0 B1 + A1 B0 - A1 B1';
const typed = (key: string) => ({
	expression: EXPRESSION,
	printed: '2.8284',
	locator: 'Table I, row 4',
	method: 'Closed form',
	note: 'Read twice.',
	bibtex: `@article{${key}, author = {Osk, Henrik}, title = {Chains of ${key}}, journal = {Letters in Fictional Physics}, year = {2015}}`
});

async function signIn(page: Page): Promise<void> {
	await page.goto(`${server.origin}/sign-in?next=${GROUP}/claims/new`);
	await page.getByLabel('E-mail address').fill(EMAIL);
	await page.getByLabel('Password', { exact: true }).fill(PASSWORD);
	await page.locator('main').getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL((url) => url.pathname === `${GROUP}/claims/new`);
}

async function fill(page: Page, fields: Readonly<Record<string, string>>): Promise<void> {
	for (const [name, value] of Object.entries(fields))
		await page.locator(`[name=${name}]`).fill(value);
	await page.locator('[name=relation]').selectOption('<=');
}

async function expectFilled(page: Page, fields: Readonly<Record<string, string>>): Promise<void> {
	for (const [name, value] of Object.entries(fields))
		await expect(page.locator(`[name=${name}]`)).toHaveValue(value);
	await expect(page.locator('[name=relation]')).toHaveValue('<=');
}

async function enterOnceSignedIn(page: Page, fields: Readonly<Record<string, string>>) {
	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	const panel = page.getByRole('group', { name: 'Sign in again' });
	await expect(panel).toBeVisible();
	await expect(page.getByText('Your session has ended, so nothing was entered yet.')).toBeVisible();
	await expectFilled(page, fields);

	await panel.getByLabel('Email').fill(EMAIL);
	await panel.getByLabel('Password').fill('a wrong password here');
	await panel.getByRole('button', { name: 'Sign in' }).click();
	await expect(panel).toBeVisible();
	await expectFilled(page, fields);

	await panel.getByLabel('Email').fill(EMAIL);
	await panel.getByLabel('Password').fill(PASSWORD);
	await panel.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByText('Signed in. Nothing is entered yet')).toBeVisible();
	await expect(panel).toHaveCount(0);
	await expectFilled(page, fields);

	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	await page.waitForURL((url) => /\/claims\/\d+$/.test(url.pathname));
	await expect(page.getByText(fields.locator ?? '').first()).toBeVisible();
	await expect(page.getByText(fields.note ?? '').first()).toBeVisible();
	await expect(page.getByText('is at most').first()).toBeVisible();
}

test('signed out in another tab, the form stays and the claim is entered', async ({ page }) => {
	await signIn(page);
	const fields = typed('anothertab');
	await fill(page, fields);
	const other = await page.context().newPage();
	await other.goto(`${server.origin}${GROUP}`);
	await other.getByText('Ada Merrin').first().click();
	await other.getByRole('button', { name: 'Sign out' }).click();
	await other.waitForURL((url) => url.pathname === '/');
	await other.close();
	await enterOnceSignedIn(page, fields);
});

test('with the session gone, without JavaScript, too', async ({ browser }) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await signIn(page);
	const fields = typed('noscript');
	await fill(page, fields);
	await context.clearCookies();
	await enterOnceSignedIn(page, fields);
	await context.close();
});

test('while a claim is changed, the version it was read in is kept', async ({ page }) => {
	await signIn(page);
	await fill(page, typed('changed'));
	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	await page.waitForURL((url) => /\/claims\/\d+$/.test(url.pathname));
	await page.getByRole('link', { name: 'Edit' }).click();
	await page.waitForURL((url) => url.pathname.endsWith('/edit'));
	await page.locator('[name=locator]').fill('Table II, row 9');
	await page.context().clearCookies();
	await page.locator('main').getByRole('button', { name: /save/i }).click();
	const panel = page.getByRole('group', { name: 'Sign in again' });
	await panel.getByLabel('Email').fill(EMAIL);
	await panel.getByLabel('Password').fill(PASSWORD);
	await panel.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByText('Signed in. Nothing is entered yet')).toBeVisible();
	await expect(page.locator('[name=locator]')).toHaveValue('Table II, row 9');
	await page.locator('main').getByRole('button', { name: /save/i }).click();
	await page.waitForURL((url) => /\/claims\/\d+$/.test(url.pathname));
	await expect(page.getByText('Table II, row 9').first()).toBeVisible();
});
