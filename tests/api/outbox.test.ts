import { eq } from 'drizzle-orm';
import type { SMTPServerOptions } from 'smtp-server';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { commentMentions, outbox } from '../../src/lib/server/db/schema';
import { MOST_ATTEMPTS, retryDelay, sendDueMails } from '../../src/lib/server/mail/sender';
import { createSmtpTransport } from '../../src/lib/server/mail/transport';
import { discardMail } from '../../src/lib/server/services/outbox/discard-mail';
import { listOutbox } from '../../src/lib/server/services/outbox/list-outbox';
import { retryMails } from '../../src/lib/server/services/outbox/retry-mails';
import { FROM, newsRows, ORIGIN, sendTo, startCatcher, tell, type Catcher } from '../support/news';
import { openServiceWorld, type ServiceWorld } from '../support/service';

let world: ServiceWorld;
const catchers: Catcher[] = [];
beforeEach(async () => {
	world = await openServiceWorld();
});
afterEach(async () => {
	await Promise.all(catchers.splice(0).map((catcher) => catcher.close()));
	world.close();
});

async function catcher(options: SMTPServerOptions = {}): Promise<Catcher> {
	const started = await startCatcher({ closeTimeout: 50, ...options });
	catchers.push(started);
	return started;
}

const rows = () => world.db.read.select().from(outbox);
const owner = () => world.as.owner.actor;

/** A mail to the member, and one to the owner where a second one is wanted. */
async function waiting(recipients = [world.as.member.actor.id]): Promise<void> {
	const { claimId, taskId, commentId } = await newsRows(world, { text: 'see eq. (7)' });
	await world.db.write((tx) =>
		tx
			.insert(commentMentions)
			.values(recipients.map((userId) => ({ commentId, userId, handle: userId })))
			.onConflictDoNothing()
	);
	await tell(world, 'mention', { claimId, taskId, commentId, recipients });
}

const answer = (code: number, text: string) =>
	Object.assign(new Error(text), { responseCode: code });

describe('a server that refuses', () => {
	it('for now is asked again, longer apart each time, ten times', async () => {
		await waiting();
		const refusing = await catcher({
			onRcptTo: (_address, _session, done) => done(answer(451, 'come back later'))
		});
		let at = Date.now();
		for (let attempt = 1; attempt <= MOST_ATTEMPTS; attempt++) {
			expect(await sendTo(world, refusing.url, { at: new Date(at) })).toBe(0);
			const [row] = await rows();
			expect(row?.attempts).toBe(attempt);
			expect(row?.state).toBe(attempt < MOST_ATTEMPTS ? 'waiting' : 'dead');
			// Not before its time.
			expect(
				await sendTo(world, refusing.url, { at: new Date(at + retryDelay(attempt) - 1) })
			).toBe(0);
			expect((await rows())[0]?.attempts).toBe(attempt);
			at += retryDelay(attempt);
		}
		expect((await rows())[0]?.lastError).toContain('come back later');
	});

	it('the recipient for good is not asked again (RFC 5321, section 4.2.1)', async () => {
		await waiting();
		const refusing = await catcher({
			onRcptTo: (_address, _session, done) => done(answer(550, 'no such mailbox'))
		});
		await sendTo(world, refusing.url);
		expect(await rows()).toMatchObject([{ state: 'dead', attempts: 1 }]);
		expect((await rows())[0]?.lastError).toContain('no such mailbox');
	});

	it('to let us in, or the content, is asked again: that is not the recipient’s fault', async () => {
		await waiting();
		const closed = await catcher({
			onMailFrom: (_a, _s, done) => done(answer(550, 'who are you'))
		});
		await sendTo(world, closed.url);
		expect(await rows()).toMatchObject([{ state: 'waiting', attempts: 1 }]);
	});

	it('one recipient still takes the others', async () => {
		await waiting([world.as.member.actor.id, owner().id]);
		const choosy = await catcher({
			onRcptTo: ({ address }, _session, done) =>
				address.startsWith('mo.') ? done(answer(550, 'no such mailbox')) : done()
		});
		expect(await sendTo(world, choosy.url)).toBe(1);
		expect((await rows()).map(({ state }) => state).sort()).toEqual(['dead', 'sent']);
	});
});

describe('a server that stalls', () => {
	const stall = (over: SMTPServerOptions = {}): SMTPServerOptions => ({
		// Never answers for the member; the owner is served.
		onRcptTo({ address }, _session, done) {
			if (!address.startsWith('mo.')) done();
		},
		...over
	});

	it('over one mail holds up none of the others', async () => {
		await waiting([world.as.member.actor.id, owner().id]);
		const stalling = await catcher(stall());
		const silenceMs = 1_500;
		const sending = sendTo(world, stalling.url, { silenceMs });
		const start = performance.now();
		while (stalling.raw.length === 0 && performance.now() - start < silenceMs) {
			await new Promise((resolve) => setTimeout(resolve, 10));
		}
		// The owner's mail came while the member's still hung.
		expect(stalling.raw).toHaveLength(1);
		expect((await rows()).filter(({ state }) => state === 'waiting').length).toBeGreaterThan(0);
		expect(await sending).toBe(1);
		const stuck = (await rows()).find(({ state }) => state === 'waiting');
		expect(stuck?.attempts).toBe(1);
		expect(stuck?.lastError).toMatch(/timeout/i);
		expect(stuck && stuck.notBefore > new Date()).toBe(true);
	});

	it('while it keeps the line busy is left after a limit for the whole mail', async () => {
		await waiting();
		const stalling = await catcher(stall());
		const start = performance.now();
		expect(await sendTo(world, stalling.url, { silenceMs: 2_000, wholeMs: 300 })).toBe(0);
		expect(performance.now() - start).toBeLessThan(1_900);
		expect(await rows()).toMatchObject([{ state: 'waiting', attempts: 1 }]);
		expect((await rows())[0]?.lastError).toContain('more than 300 ms');
	});
});

describe('a server of ours that stops', () => {
	it('begins no further mail, and sends them all after its next start', async () => {
		await waiting([world.as.member.actor.id, owner().id]);
		const good = await catcher();
		expect(await sendTo(world, good.url, { signal: AbortSignal.abort() })).toBe(0);
		expect(await rows()).toMatchObject([{ attempts: 0 }, { attempts: 0 }]);
		expect(await sendTo(world, good.url)).toBe(2);
	});
});

describe('what is sent twice', () => {
	it('when the server dies between the mail and its answer bears the same Message-ID', async () => {
		await waiting();
		let deaths = 1;
		const got: string[] = [];
		const dying = await catcher({
			onData(stream, _session, done) {
				const chunks: Buffer[] = [];
				stream.on('data', (chunk: Buffer) => chunks.push(chunk));
				stream.on('end', () => {
					got.push(Buffer.concat(chunks).toString());
					// The whole mail arrived; the first time the answer never does.
					if (deaths-- > 0) dying.hangUp();
					else done();
				});
			}
		});
		expect(await sendTo(world, dying.url)).toBe(0);
		const at = new Date(Date.now() + retryDelay(1) + 1);
		expect(await sendTo(world, dying.url, { at })).toBe(1);
		expect(await sendTo(world, dying.url, { at: new Date(at.getTime() + 86_400_000) })).toBe(0);
		const ids = got.map((mail) => /^Message-ID: (.+)$/im.exec(mail)?.[1]?.trim());
		const [row] = await rows();
		expect(ids).toEqual([row?.messageId, row?.messageId]);
	});

	it('when this process dies before it could note so bears the same Message-ID', async () => {
		await waiting();
		const good = await catcher();
		const transport = createSmtpTransport(good.url, FROM);
		const options = { db: world.db, transport, origin: ORIGIN, now: () => new Date() };
		const crashed = { ...world.db, write: () => Promise.reject(new Error('killed')) };
		await expect(sendDueMails({ ...options, db: crashed })).rejects.toThrow('killed');
		expect(await sendDueMails(options)).toBe(1);
		expect(await sendDueMails(options)).toBe(0);
		transport.close();
		const mails = await good.parsed();
		const [row] = await rows();
		expect(mails.map(({ messageId }) => messageId)).toEqual([row?.messageId, row?.messageId]);
	});
});

describe('the administrator', () => {
	const admin = () => ({ ...world.as.owner, actor: { ...owner(), isAdmin: true } });

	async function dead(): Promise<string> {
		await waiting();
		const refusing = await catcher({
			onRcptTo: (_address, _session, done) => done(answer(550, 'no such mailbox'))
		});
		await sendTo(world, refusing.url);
		return (await rows())[0]?.id ?? '';
	}

	it('sees what is dead and why, and sends it again', async () => {
		const id = await dead();
		const beyond = await listOutbox(admin(), { state: 'dead', page: 99 });
		const page = await listOutbox(admin(), { state: 'dead', page: 1 });
		expect(beyond).toEqual(page);
		expect(page.counts).toEqual({ waiting: 0, sent: 0, dropped: 0, dead: 1 });
		expect(page.rows).toMatchObject([
			{ id, kind: 'mention', to: 'mo.member@reading.example', attempts: 1 }
		]);
		expect(page.rows[0]?.lastError).toContain('no such mailbox');
		expect(await retryMails(admin(), 'all-dead')).toBe(1);
		const good = await catcher();
		expect(await sendTo(world, good.url)).toBe(1);
		await expect(retryMails(admin(), id)).rejects.toMatchObject({ code: 'not-found' });
	});

	it('discards one', async () => {
		const id = await dead();
		await discardMail(admin(), id);
		expect(await retryMails(admin(), 'all-dead')).toBe(0);
		const [row] = await world.db.read.select().from(outbox).where(eq(outbox.id, id));
		expect(row?.state).toBe('dropped');
	});

	it('is nobody else, not even an owner', async () => {
		const id = await dead();
		const refused = { code: 'not-found' };
		await expect(listOutbox(world.as.owner, { state: 'dead', page: 1 })).rejects.toMatchObject(
			refused
		);
		await expect(retryMails(world.as.owner, id)).rejects.toMatchObject(refused);
		await expect(discardMail(world.as.owner, id)).rejects.toMatchObject(refused);
		expect((await rows())[0]?.state).toBe('dead');
	});
});
