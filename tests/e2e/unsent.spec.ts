import { expect, test, type Cookie, type Page } from '@playwright/test';
import { startServer, type TestServer } from '../support/server';

/** Forms of a group whose session ends, that meet a conflict, or are pressed twice lose nothing. */
let server: TestServer;
let cookies: Cookie[];
test.beforeAll(async ({ browser }) => {
	server = await startServer();
	const page = await browser.newPage();
	await page.goto(`${server.origin}/sign-up?next=/groups/new`);
	await page.getByLabel('Name').fill('Ada Merrin');
	await page.getByLabel('E-mail address').fill('ada@quarry.example');
	await page.getByLabel('Password', { exact: true }).fill('granite granite slate');
	await page.getByRole('button', { name: 'Sign up' }).click();
	await page.waitForURL((url) => url.pathname === '/groups/new');
	await page.getByLabel('Name').fill('Quarry group');
	await page.locator('main').getByRole('button', { name: /start/i }).click();
	await page.waitForURL((url) => url.pathname === GROUP);
	// CHSH, 2 sqrt 2: B. S. Cirel'son, Lett. Math. Phys. 4, 93 (1980).
	await page.goto(`${server.origin}${GROUP}/claims/new`);
	await page.locator('[name=expression]').fill('A0 B0 + A0 B1 + A1 B0 - A1 B1');
	await page.locator('[name=printed]').fill('2.8284');
	await page.locator('[name=locator]').fill('Table I, row 4');
	await page.locator('[name=bibtex]').fill(BIBTEX);
	await page.getByRole('button', { name: 'Enter and recompute' }).click();
	await page.waitForURL((url) => url.pathname === `${GROUP}/claims/1`);
	cookies = await page.context().cookies();
	await page.close();
});
test.afterAll(async () => {
	await server.stop();
});

const GROUP = '/g/quarry-group';
const BIBTEX =
	'@article{chains, author = {Osk, Henrik}, title = {Chains}, journal = {Letters in Fictional Physics}, year = {2015}}';

/** Opens a page signed in, once its script runs. */
async function open(page: Page, path: string): Promise<string[]> {
	const complaints: string[] = [];
	page.on('pageerror', (error) => complaints.push(String(error)));
	await page.context().addCookies(cookies);
	await page.goto(`${server.origin}${path}`, { waitUntil: 'networkidle' });
	return complaints;
}

/** Presses signed out, finds out, signs in elsewhere (the cookies are back), presses again. */
async function pressSignedOut(page: Page, button: string, kept: () => Promise<void>) {
	const press = page.locator('main').getByRole('button', { name: button, exact: true });
	await page.context().clearCookies();
	await press.click();
	const alert = page.getByRole('alert').filter({ hasText: 'You are signed out.' });
	await expect(alert).toBeVisible();
	await expect(alert).toBeInViewport();
	await expect(alert.getByRole('link')).toHaveAttribute('target', '_blank');
	await expect(press).toBeEnabled();
	await kept();
	await page.context().addCookies(cookies);
	await press.click();
	await expect(alert).toHaveCount(0);
}

test('the settings', async ({ page }) => {
	const complaints = await open(page, `${GROUP}/settings`);
	const description = page.getByLabel('Description');
	await description.fill('Bounds of chained inequalities.');
	await pressSignedOut(page, 'Save the settings', () =>
		expect(description).toHaveValue('Bounds of chained inequalities.')
	);
	await expect(page.getByText('The settings are saved.')).toBeVisible();
	await expect(description).toHaveValue('Bounds of chained inequalities.');
	expect(complaints).toEqual([]);
});

test('a task, from being assigned to being submitted', async ({ page }) => {
	const complaints = await open(page, `${GROUP}/tasks/new?claims=1`);
	const instructions = page.getByLabel('Instructions');
	await instructions.fill('Another solver, please.');
	await pressSignedOut(page, 'Assign the task', () =>
		expect(instructions).toHaveValue('Another solver, please.')
	);
	await page.waitForURL((url) => url.pathname === `${GROUP}/tasks/1`);

	await test.step('a tab that is behind says so and catches up', async () => {
		const behind = await page.context().newPage();
		await behind.goto(`${server.origin}${GROUP}/tasks/1`, { waitUntil: 'networkidle' });
		await page.getByRole('button', { name: 'Take it' }).click();
		await expect(page.getByText('It is yours now.')).toBeVisible();
		await behind.getByRole('button', { name: 'Take it' }).click();
		await expect(behind.getByRole('alert')).toBeVisible();
		await expect(behind.getByRole('button', { name: 'Take it' })).toHaveCount(0);
		await expect(behind.getByRole('button', { name: 'Start' })).toBeVisible();
		await expect(behind.getByRole('alert')).toBeVisible();
		await behind.close();
	});
	await page.getByRole('button', { name: 'Start' }).click();
	await expect(page.getByText('Begun.')).toBeVisible();

	const value = page.getByLabel('Value you found');
	await value.fill('2.8284');
	await page.getByLabel('Program', { exact: true }).fill('Own script');
	await page.getByLabel('Version', { exact: true }).fill('1.2');
	await page.getByLabel('Method', { exact: true }).fill('Level 1');

	await test.step('leaving asks first', async () => {
		const asked: string[] = [];
		page.once('dialog', (dialog) => {
			asked.push(dialog.message());
			void dialog.dismiss();
		});
		await page.locator('main').getByRole('link', { name: 'Tasks', exact: true }).click();
		await expect.poll(() => asked).toEqual(['What you typed is not sent yet. Leave it?']);
		await expect(value).toHaveValue('2.8284');
	});
	await pressSignedOut(page, 'Submit', async () => {
		await expect(value).toHaveValue('2.8284');
		await expect(page.getByLabel('Program', { exact: true })).toHaveValue('Own script');
	});
	await expect(page.getByText('Submitted. Somebody else accepts it or returns it.')).toBeVisible();

	const comment = page.locator('#comment-body-new');
	await comment.fill('It took a minute.');
	await pressSignedOut(page, 'Comment', () => expect(comment).toHaveValue('It took a minute.'));
	await expect(page.getByRole('article').getByText('It took a minute.')).toBeVisible();
	await expect(comment).toHaveValue('');
	// Nothing is unsent any more, so that nobody is asked.
	await page.locator('main').getByRole('link', { name: 'Tasks', exact: true }).click();
	await page.waitForURL((url) => url.pathname === `${GROUP}/tasks`);
	expect(complaints).toEqual([]);
});

test('an invitation that is pressed twice goes out once', async ({ page }) => {
	const complaints = await open(page, `${GROUP}/members`);
	await page.getByLabel('E-mail addresses').fill('bo@quarry.example');
	await page.getByRole('button', { name: 'Send invitations' }).dblclick();
	await expect(page.getByText('An invitation goes to bo@quarry.example.')).toBeVisible();
	await page.getByLabel('E-mail addresses').fill('bo@quarry.example');
	await page.getByRole('button', { name: 'Send invitations' }).click();
	await expect(page.getByText('Already invited just now')).toBeVisible();
	const mails = () => server.mail.caught().filter(({ to }) => to.includes('bo@quarry.example'));
	await expect.poll(() => mails().length, { timeout: 60_000 }).toBe(1);
	expect(complaints).toEqual([]);
});

test('without JavaScript the error page leads to signing in and back', async ({ browser }) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await open(page, `${GROUP}/tasks/new?claims=1`);
	await context.clearCookies();
	await page.getByRole('button', { name: 'Assign the task' }).click();
	await expect(page.getByRole('heading', { name: 'Sign in first' })).toBeVisible();
	await expect(page.getByRole('banner').getByRole('link', { name: 'Members' })).toHaveCount(0);
	await page.locator('main').getByRole('link', { name: 'Sign in' }).click();
	const next = new URL(page.url()).searchParams.get('next');
	expect(next).toBe(`${GROUP}/tasks/new?claims=1`);
	await context.close();
});
