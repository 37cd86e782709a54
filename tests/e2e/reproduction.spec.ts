import { expect, test, type Browser, type Locator, type Page } from '@playwright/test';
import type { CaughtMailView } from '../../src/lib/schemas/mail-views';
import { startServer, type TestServer } from '../support/server';

/**
 * What people settle where machines can't, on the production build in two browsers at once: an
 * owner and the member they invite, and a visitor who wrote the paper.
 */
let server: TestServer;
let second: Browser;
test.beforeAll(async ({ browser, launchOptions }) => {
	server = await startServer();
	second = await browser.browserType().launch(launchOptions);
});
test.afterAll(async () => {
	await second.close();
	await server.stop();
});

const OWNER = 'ada@slate.example';
const MEMBER = 'bo@slate.example';
const VISITOR = 'osk@fictional.example';
const GROUP = '/g/slate-row';

const paper = (key: string, title: string, doi: string) => `@article{${key},
  author  = {Osk, Henrik},
  title   = {${title}},
  journal = {Letters in Fictional Physics},
  year    = {2015},
  doi     = {${doi}}
}`;

// 2 n cos(pi / 2n) = 7.391036... for n = 4: S. Wehner, Phys. Rev. A 73, 022110 (2006); formula from
// memory. The claim has two neighbouring digits swapped.
const WRONG = '7.3190';

/** A glob would also match an address that only names the path in `next`. */
const at = (path: string) => (url: URL) => url.pathname.endsWith(path);

async function mailTo(address: string, about: RegExp): Promise<CaughtMailView> {
	const found = () =>
		server.mail.caught().find(({ to, subject }) => to.includes(address) && about.test(subject));
	await expect.poll(() => found()?.subject, { timeout: 60_000, intervals: [250] }).toMatch(about);
	const mail = found();
	if (!mail) throw new Error('The mail is gone.');
	return mail;
}

/** A press that comes before the page's script is ready may be undone by it. */
async function unfold(page: Page, summary: string, inside: Locator): Promise<void> {
	await expect(async () => {
		if (!(await inside.isVisible())) await page.getByText(summary, { exact: true }).first().click();
		await expect(inside).toBeVisible({ timeout: 1_000 });
	}).toPass();
}

async function signUp(page: Page, name: string, password: string, email?: string): Promise<void> {
	await page.getByLabel('Name').fill(name);
	if (email) await page.getByLabel('E-mail address').fill(email);
	await page.getByLabel('Password', { exact: true }).fill(password);
	await page.getByRole('button', { name: 'Sign up' }).click();
}

test('what no solver settles is assigned, reproduced, returned, accepted; an author answers', async ({
	page: owner
}) => {
	test.setTimeout(300_000);
	const member = await (await second.newContext()).newPage();
	const complaints: string[] = [];
	for (const page of [owner, member]) {
		page.on('pageerror', (error) => complaints.push(String(error)));
		page.on('console', (message) => {
			if (message.text().includes('Content Security Policy')) complaints.push(message.text());
		});
	}

	await test.step('an owner invites by mail', async () => {
		await owner.goto(`${server.origin}/sign-up?next=/groups/new`);
		await signUp(owner, 'Ada Merrin', 'granite granite slate', OWNER);
		await owner.waitForURL(at('/groups/new'));
		await expect(owner.locator('main').getByRole('button', { name: /start/i })).toBeVisible();
		await owner.getByLabel('Name').fill('Slate Row');
		await owner.locator('main').getByRole('button', { name: /start/i }).click();
		await owner.waitForURL(at(GROUP));
		await owner.goto(`${server.origin}${GROUP}/members`);
		await owner.getByLabel('E-mail addresses').fill(MEMBER);
		await owner.getByRole('button', { name: 'Send invitations' }).click();
		await expect(owner.getByText(MEMBER).first()).toBeVisible();
	});

	await test.step('the member joins by the mail', async () => {
		const mail = await mailTo(MEMBER, /Slate Row/);
		const link = /http:\/\/\S+\/join\/\S+/.exec(mail.text)?.[0];
		expect(link).toBeDefined();
		await member.goto(link ?? '');
		await member
			.getByRole('link', { name: /sign up|account/i })
			.first()
			.click();
		await expect(member.getByLabel('E-mail address')).toHaveValue(MEMBER);
		await signUp(member, 'Bo Tarn', 'basalt basalt quartz');
		const join = member.locator('main').getByRole('button', { name: /join/i });
		await join.click();
		await member.waitForURL((url) => url.pathname.startsWith(GROUP));
	});

	await test.step('enters a claim the solvers cannot settle', async () => {
		await member.goto(`${server.origin}${GROUP}/claims/new`);
		await member.locator('[name=subjectKind][value=described]').check({ force: true });
		await member.locator('[name=described]').fill('CHSH, error rate 3.25 %');
		await member.locator('[name=quantity]').selectOption('key-rate');
		await member.locator('[name=relation]').selectOption('>=');
		await member.getByLabel('Value, as printed').fill('0.437');
		await member.locator('[name=bibtex]').fill(paper('osk1', 'Keys', '10.5555/lfp.2015.0001'));
		await member.locator('[name=locator]').fill('Thm 2');
		await member.getByRole('button', { name: 'Enter and recompute' }).click();
		await member.waitForURL(at('/claims/1'));
		await expect(member.getByText('no solver for this quantity').first()).toBeVisible();
	});

	await test.step('the owner assigns it in one step', async () => {
		await owner.goto(`${server.origin}${GROUP}/claims/1`);
		await unfold(owner, 'Assign a task', owner.getByLabel('Who'));
		await owner.getByLabel('Who').selectOption({ label: 'Bo Tarn' });
		await owner.getByRole('button', { name: 'Assign', exact: true }).click();
		await expect(owner.getByRole('link', { name: 'Task 1', exact: true })).toBeVisible();
		const mail = await mailTo(MEMBER, /Task 1 assigned to you/);
		expect(mail.text).toContain(`${GROUP}/tasks/1`);
	});

	const submit = async (value: string, file?: string) => {
		await member.getByLabel('Value you found').fill(value);
		await member.locator('[name=program]').fill('mpmath');
		await member.locator('[name=programVersion]').fill('1.3.0');
		if (file) {
			const buffer = Buffer.from('S,Q,rate\n2.644579,0.0325,0.436944\n');
			await member
				.locator('[name=files]')
				.setInputFiles({ name: file, mimeType: 'text/csv', buffer });
		}
		await member.getByRole('button', { name: 'Submit', exact: true }).click();
		await expect(member.getByText('You submitted this, so somebody else').first()).toBeVisible();
	};

	await test.step('the member submits a value with a file and cannot accept it', async () => {
		await member.goto(`${server.origin}${GROUP}/tasks/1`);
		await submit('0.4369', 'rate.csv');
		await expect(member.getByRole('link', { name: 'rate.csv' })).toBeVisible();
		await expect(member.getByRole('button', { name: /^Accept/ })).toHaveCount(0);
		const forced = await member.request.post(`${server.origin}${GROUP}/tasks/1?/accept`, {
			headers: { origin: server.origin, accept: 'text/html' },
			form: {}
		});
		expect(forced.status()).toBe(403);
		await owner.reload();
		await expect(owner.getByText('no solver for this quantity').first()).toBeVisible();
	});

	await test.step('the owner returns it with a reason', async () => {
		await mailTo(OWNER, /waits for a decision/);
		await owner.goto(`${server.origin}${GROUP}/tasks/1`);
		await unfold(owner, 'Return it…', owner.locator('#reason-return'));
		await owner.locator('#reason-return').fill('One digit more, please.');
		await owner.getByRole('button', { name: 'Return it with this' }).click();
		const mail = await mailTo(MEMBER, /Task 1 returned/);
		expect(mail.text).toContain('One digit more, please.');
	});

	await test.step('the member tries again, the owner accepts, the verdict follows', async () => {
		await member.goto(`${server.origin}${GROUP}/tasks/1`);
		await expect(member.getByText('One digit more, please.').first()).toBeVisible();
		await submit('0.436944');
		await owner.goto(`${server.origin}${GROUP}/tasks/1`);
		const download = owner.waitForEvent('download');
		await owner.getByRole('link', { name: 'rate.csv' }).first().click();
		expect((await download).suggestedFilename()).toBe('rate.csv');
		await owner.getByRole('button', { name: /^Accept/ }).click();
		await expect(owner.getByText('Accepted', { exact: true }).first()).toBeVisible();
		await mailTo(MEMBER, /Task 1 accepted/);
		await member.goto(`${server.origin}${GROUP}/claims/1`);
		await expect(member.getByText('Agreement').first()).toBeVisible();
		await expect(member.getByTestId('reason')).toContainText('Bo Tarn');
	});

	await test.step('a wrong value becomes a Discrepancy', async () => {
		await member.goto(`${server.origin}${GROUP}/claims/new`);
		await member.getByText('Family', { exact: true }).first().click();
		await member.getByRole('combobox', { name: 'Family' }).selectOption('chained');
		await member.locator('[name=familyParameter]').fill('4');
		await member.getByRole('combobox', { name: 'Quantity' }).selectOption('quantum');
		await member.getByLabel('Value, as printed').fill(WRONG);
		await member.locator('[name=bibtex]').fill(paper('osk2', 'Chains', '10.5555/lfp.2015.0002'));
		await member.locator('[name=locator]').fill('Table I, n = 4');
		await member.getByRole('button', { name: 'Enter and recompute' }).click();
		await member.waitForURL(at('/claims/2'));
		await expect(member.getByText('Discrepancy').first()).toBeVisible({ timeout: 90_000 });
		await mailTo(OWNER, /discrepancy/i);
	});

	await test.step('a second person confirms the transcription and it is published', async () => {
		await owner.goto(`${server.origin}${GROUP}/claims/2`);
		await expect(owner.getByRole('button', { name: 'Publish' })).toHaveCount(0);
		for (const name of ['valueMatches', 'locatorMatches', 'inequalityMatches']) {
			await owner.locator(`[name=${name}][value=yes]`).check({ force: true });
		}
		await owner.getByRole('button', { name: 'Record the comparison' }).click();
		await owner.getByRole('button', { name: 'Publish' }).click();
		await expect(owner.getByRole('button', { name: 'Show it to the group only' })).toBeVisible();
	});

	await test.step('an author answers from the public page', async () => {
		const visitor = await (await second.newContext()).newPage();
		const { items } = (await (
			await owner.request.get(`${server.origin}/api/v1/groups/slate-row/claims?numbers=2`)
		).json()) as { items: { id: string }[] };
		await visitor.goto(`${server.origin}/claims/${items[0]?.id}`);
		await expect(visitor.getByText(/does not reproduce as entered/i).first()).toBeVisible();
		await expect(visitor.getByText('Bo Tarn')).toHaveCount(0);
		await visitor
			.getByRole('link', { name: /answer/i })
			.first()
			.click();
		await visitor.waitForURL(at('/answer'));
		await visitor.getByLabel('Name').fill('Henrik Osk');
		await visitor.getByLabel('E-mail address').fill(VISITOR);
		await visitor.getByLabel('Message').fill('Two digits changed places in print.');
		await visitor.getByRole('button', { name: /send/i }).click();
		await expect(visitor.getByText(/thank you/i).first()).toBeVisible();
		const mail = await mailTo(OWNER, /author/i);
		expect(mail.text).toContain('Two digits changed places in print.');
		await owner.goto(`${server.origin}${GROUP}/claims/2`);
		await expect(owner.getByText('Two digits changed places in print.').first()).toBeVisible();
		await visitor.context().close();
	});

	await test.step('the activity tells all of it', async () => {
		await owner.goto(`${server.origin}${GROUP}/activity`);
		for (const said of ['returned', 'accepted', 'published claim 2', 'answered claim 2']) {
			await expect(owner.getByRole('link', { name: said }).first()).toBeVisible();
		}
	});
	expect(complaints).toEqual([]);
});
