import { expect, test } from '@playwright/test';
import { startServer, type TestServer } from '../support/server';

/** The whole path of a newcomer, on the production build: from a paper's number to the public page. */
let server: TestServer;
test.beforeAll(async () => {
	server = await startServer();
});
test.afterAll(async () => {
	await server.stop();
});

const PAPER = `@article{osk2015,
  author  = {Osk, Henrik},
  title   = {Chains of measurements},
  journal = {Letters in Fictional Physics},
  volume  = {21},
  pages   = {9},
  year    = {2015},
  doi     = {10.5555/lfp.2015.0009}
}`;

// 2 n cos(pi / 2n) = 7.391036... for n = 4: S. Wehner, Phys. Rev. A 73, 022110 (2006); formula from
// memory. The claim has two neighbouring digits swapped.
const WRONG = '7.3190';
const RIGHT = '7.3910';

/** A glob would also match an address that only names the path in `next`. */
const at = (path: string) => (url: URL) => url.pathname.endsWith(path);

test('a wrong claim is found, explained, mailed, corrected, published and read by everyone', async ({
	page,
	browser
}) => {
	const outside: string[] = [];
	const complaints: string[] = [];
	page.on('request', (request) => {
		if (!request.url().startsWith(server.origin) && !request.url().startsWith('data:'))
			outside.push(request.url());
	});
	page.on('console', (message) => {
		if (message.text().includes('Content Security Policy')) complaints.push(message.text());
	});
	page.on('pageerror', (error) => complaints.push(String(error)));

	await test.step('sign up and start a group', async () => {
		await page.goto(`${server.origin}/`);
		await page.getByRole('link', { name: 'Start a group' }).first().click();
		await page.waitForURL(/sign-in|sign-up/);
		await page.goto(`${server.origin}/sign-up?next=/groups/new`);
		await page.getByLabel('Name').fill('Ada Merrin');
		await page.getByLabel('E-mail address').fill('ada@quarry.example');
		await page.getByLabel('Password', { exact: true }).fill('granite granite slate');
		await page.getByRole('button', { name: 'Sign up' }).click();
		await page.waitForURL(at('/groups/new'));
		await page.getByLabel('Name').fill('Quarry group');
		await page.locator('main').getByRole('button', { name: /start/i }).click();
		await page.waitForURL(at('/g/quarry-group'));
	});

	await test.step('enter a claim as printed', async () => {
		await page.getByRole('link', { name: 'Enter a claim' }).first().click();
		await page.waitForURL(at('/claims/new'));
		// As fast as it can be typed: what was read must follow the last key all the same.
		await page.getByText('Correlator table', { exact: true }).first().click();
		await page.locator('[name=table]').fill('0 0 0\n0 1 1\n0 1 -1');
		// By its role: the form holds the reading twice, one of them for narrow screens and hidden here.
		const read = page.getByRole('definition').filter({ hasText: 'Correlator table, 2 × 2' });
		await expect(read).toBeVisible();
		await page.getByText('Family', { exact: true }).first().click();
		await page.getByRole('combobox', { name: 'Family' }).selectOption('chained');
		await page.locator('[name=familyParameter]').fill('4');
		await page.getByRole('combobox', { name: 'Quantity' }).selectOption('quantum');
		await page.getByLabel('Value, as printed').fill(WRONG);
		await expect(page.getByText('Read as 7.31895 to 7.31905').first()).toBeVisible();
		await page.locator('[name=method]').fill('Closed form');
		await page.locator('[name=bibtex]').fill(PAPER);
		await page.locator('[name=locator]').fill('Table I, n = 4');
		await expect(page.getByText('Chains of measurements').first()).toBeVisible();
		await page.getByRole('button', { name: 'Enter and recompute' }).click();
		await page.waitForURL(at('/claims/1'));
	});

	await test.step('see the Discrepancy and its diagnosis', async () => {
		await expect(page.getByText('Discrepancy').first()).toBeVisible({ timeout: 90_000 });
		await expect(page.getByText('two neighbouring digits changed places').first()).toBeVisible({
			timeout: 90_000
		});
	});

	await test.step('find the mail in the sink', async () => {
		await expect
			.poll(() => server.mail.caught().length, { timeout: 120_000, intervals: [500] })
			.toBe(1);
		const [mail] = server.mail.caught();
		expect(mail?.to).toContain('ada@quarry.example');
		expect(mail?.text).toContain(WRONG);
		expect(mail?.text).toContain('7.39103');
		expect(mail?.text).toContain('two neighbouring digits changed places');
		expect(mail?.text).toContain('/g/quarry-group/claims/1');
	});

	await test.step('correct it and see Agreement', async () => {
		await page.getByRole('link', { name: 'Edit' }).click();
		await page.waitForURL(at('/claims/1/edit'));
		await page.getByLabel('Value, as printed').fill(RIGHT);
		await page.locator('main').getByRole('button', { name: /save/i }).click();
		await page.waitForURL(at('/claims/1'));
		await expect(page.getByText('Agreement').first()).toBeVisible({ timeout: 30_000 });
	});

	await test.step('publish it', async () => {
		await page.getByRole('button', { name: 'Publish' }).click();
		await expect(page.getByRole('button', { name: 'Show it to the group only' })).toBeVisible();
	});

	await test.step('find it on the public page without an account', async () => {
		const visitor = await (await browser.newContext()).newPage();
		await visitor.goto(`${server.origin}/`);
		const row = visitor.getByRole('row', { name: /Chained/ });
		await expect(row).toBeVisible();
		await expect(row.getByText('Osk 2015').first()).toBeVisible();
		await row.getByRole('link', { name: RIGHT }).first().click();
		await visitor.waitForURL((url) => url.pathname.startsWith('/claims/'));
		await expect(visitor.getByText(RIGHT).first()).toBeVisible();
		await expect(visitor.getByText('Agreement').first()).toBeVisible();
		await expect(visitor.getByText('ada@quarry.example')).toHaveCount(0);
		await expect(visitor.getByText('Ada Merrin')).toHaveCount(0);
		await visitor.context().close();
	});

	expect(outside).toEqual([]);
	expect(complaints).toEqual([]);
});
