import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { outbox } from '../../src/lib/server/db/schema';
import { MAIL_WAIT_MS } from '../../src/lib/server/services/notifications/verdict-notices';
import { MOST_ATTEMPTS, retryDelay, sendDueMails } from '../../src/lib/server/mail/sender';
import { startMailSink, type MailSink } from '../../src/lib/server/mail/sink';
import { createSmtpTransport } from '../../src/lib/server/mail/transport';
import { editClaim } from '../../src/lib/server/services/claims/edit-claim';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { showClaim } from '../../src/lib/server/services/claims/show-claim';
import { withdrawClaim } from '../../src/lib/server/services/claims/withdraw-claim';
import { claimFields, openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
let sink: MailSink;
beforeEach(async () => {
	world = await openServiceWorld();
	sink = await startMailSink();
});
afterEach(async () => {
	await sink.close();
	world.close();
});

const FROM = 'Merestone <ledger@merestone.example>';
const ORIGIN = 'https://merestone.example';

async function send(url = sink.url, at = Date.now()): Promise<number> {
	const transport = createSmtpTransport(url, FROM);
	const sent = await sendDueMails({
		db: world.db,
		transport,
		origin: ORIGIN,
		now: () => new Date(at)
	});
	transport.close();
	return sent;
}

const rows = () => world.db.read.select().from(outbox);
const wrongClaim = () => enterClaim(world.as.member, claimFields({ printed: '2.8248' }));

describe('a discrepancy', () => {
	it('is mailed once to who entered the claim and to everyone from maintainer up', async () => {
		const { number } = await wrongClaim();
		expect(await rows()).toEqual([]);
		await world.recompute();
		expect(await send()).toBe(3);
		expect(await send()).toBe(0);
		const mails = sink.caught();
		expect(mails.map(({ to }) => to).sort()).toEqual([
			'Mae Maintainer <mae.maintainer@reading.example>',
			'Mo Member <mo.member@reading.example>',
			'Olin Owner <olin.owner@reading.example>'
		]);
		const [mail] = mails;
		expect(mail?.subject).toBe(`Discrepancy: Quantum maximum of CHSH, claim ${number}`);
		for (const fact of [
			'2.8248',
			'2.82842712',
			'two neighbouring digits changed places: 2.8284',
			'Arden & Voss 2004, eq. (7)',
			`${ORIGIN}/g/first/claims/${number}`
		]) {
			expect(mail?.text).toContain(fact);
		}
	});

	it('waits for the stations, but not longer than a minute', async () => {
		await wrongClaim();
		await world.recompute();
		const due = (await rows()).map(
			({ createdAt, notBefore }) => notBefore.getTime() - createdAt.getTime()
		);
		// Queued with the wait, released as soon as the last station was done.
		expect(Math.max(...due)).toBeLessThan(MAIL_WAIT_MS);
	});

	it('that is corrected before the mail goes out is not mailed', async () => {
		const { number } = await wrongClaim();
		await world.recompute();
		await editClaim(world.as.member, number, 1, claimFields());
		expect(await send()).toBe(0);
		expect(new Set((await rows()).map(({ state }) => state))).toEqual(new Set(['dropped']));
	});

	it('of a withdrawn claim is not mailed', async () => {
		const { number } = await wrongClaim();
		await world.recompute();
		await withdrawClaim(world.as.member, number);
		expect(await send()).toBe(0);
	});

	it('within usual solver tolerance is shown but not mailed', async () => {
		// 2 sqrt 2 = 2.82842712...: off by 2e-7 beyond the digits printed.
		const { number } = await enterClaim(world.as.member, claimFields({ printed: '2.8284275' }));
		await world.recompute();
		const claim = await showClaim(world.as.member, number);
		expect(claim.verdict).toMatchObject({ status: 'discrepancy', reasonCode: 'last-digits' });
		expect(await rows()).toEqual([]);
	});
});

describe('the outbox', () => {
	it('keeps the mail while the server is down, longer each time, and gives up after ten', async () => {
		await enterClaim(world.as.owner, claimFields({ printed: '2.8248' }));
		await world.recompute();
		await sink.close();
		let at = Date.now();
		for (let attempt = 1; attempt <= MOST_ATTEMPTS; attempt++) {
			expect(await send(sink.url, at)).toBe(0);
			at += retryDelay(attempt) + 1;
		}
		for (const row of await rows()) {
			expect(row).toMatchObject({ state: 'dead', attempts: MOST_ATTEMPTS });
			expect(row.lastError).toContain('ECONNREFUSED');
		}
		expect(retryDelay(1)).toBe(60_000);
		expect(retryDelay(20)).toBe(6 * 3_600_000);
		sink = await startMailSink();
	});

	it('says in the headers what it is, under a Message-ID that stays', async () => {
		const raw: Buffer[] = [];
		const server = new SMTPServer({
			authOptional: true,
			disabledCommands: ['AUTH', 'STARTTLS'],
			onData(stream, _session, done) {
				const chunks: Buffer[] = [];
				stream.on('data', (chunk: Buffer) => chunks.push(chunk));
				stream.on('end', () => {
					raw.push(Buffer.concat(chunks));
					done();
				});
			}
		});
		await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
		const address = server.server.address();
		const port = typeof address === 'object' ? address?.port : 0;
		await enterClaim(
			world.as.owner,
			claimFields({
				subjectKind: 'expression',
				expression: '3 A0 B0 + A1 B1',
				printed: '5',
				locator: '<script>alert(1)</script> & "eq"'
			})
		);
		await world.recompute();
		await send(`smtp://127.0.0.1:${port}`);
		await new Promise<void>((resolve) => server.close(() => resolve()));
		expect(raw.length).toBeGreaterThan(0);
		const ids = (await rows()).map(({ messageId }) => messageId);
		for (const message of raw) {
			const mail = await simpleParser(message);
			expect(mail.headers.get('auto-submitted')).toBe('auto-generated');
			expect(ids).toContain(mail.messageId);
			expect(mail.text).toContain('does not reproduce as entered');
			expect(String(mail.html)).toContain('&lt;script&gt;alert(1)');
			expect(String(mail.html)).not.toContain('<script');
			expect(String(mail.html)).not.toMatch(/<img|url\(|http:\/\//);
		}
	});
});
