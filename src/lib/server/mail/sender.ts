import { and, eq } from 'drizzle-orm';
import type { Database } from '../db/client';
import { outbox } from '../db/schema';
import { dueMails, type DueMail } from './due-mails';
import { renderDue } from './render-due';
import { isRefusedForGood, type MailTransport } from './transport';

export const MOST_ATTEMPTS = 10;
const FIRST_DELAY_MS = 60_000;
const LONGEST_DELAY_MS = 6 * 3_600_000;
/** Sent side by side, so that a server that stalls over one mail does not hold up the rest. */
const LANES = 4;

/** 1 min, 2 min, 4 min ... 6 h after the failed attempt of that number (from 1). */
export const retryDelay = (attempt: number) =>
	Math.min(LONGEST_DELAY_MS, FIRST_DELAY_MS * 2 ** (attempt - 1));

export interface SenderOptions {
	readonly db: Database;
	readonly transport: MailTransport;
	/** Address of the site, for links. */
	readonly origin: string;
	now(): Date;
	/** The server stops: what is under way ends, nothing more is begun. */
	readonly signal?: AbortSignal;
	/** Called with what went wrong; the mail stays in the outbox. */
	onFailure?(messageId: string, error: Error, dead: boolean): void;
}

/**
 * Sends what is due in the outbox. At least once: a crash between sending and marking sends it
 * again under the same Message-ID.
 * @returns how many were sent
 */
export async function sendDueMails(options: SenderOptions): Promise<number> {
	const due = [...(await dueMails(options.db.read, options.now()))];
	let sent = 0;
	const lane = async () => {
		for (let row = due.shift(); row && !options.signal?.aborted; row = due.shift()) {
			if (await sendOne(options, row)) sent++;
		}
	};
	await Promise.all(Array.from({ length: LANES }, lane));
	return sent;
}

async function sendOne(options: SenderOptions, row: DueMail): Promise<boolean> {
	const { db, transport, origin, now } = options;
	try {
		const mail = row.to && (await renderDue(db.read, row, origin, now()));
		if (!mail || !row.to) {
			await mark(db, row.id, { state: 'dropped' });
			return false;
		}
		await transport.send({ ...mail, to: row.to, messageId: row.messageId });
	} catch (cause) {
		await fail(options, row, cause instanceof Error ? cause : new Error(String(cause)));
		return false;
	}
	// Outside the try: when this fails the mail was sent, and is no failure of the server's.
	await mark(db, row.id, { state: 'sent', sentAt: now(), attempts: row.attempts + 1 });
	return true;
}

/**
 * Tried again later, longer each time; dead after ten, or at once when the server refuses the
 * recipient for good: RFC 5321 section 4.2.1 asks not to repeat what was answered with 5yz, and
 * repeating it spoils the sender's name. The administrator's page can still send it again.
 */
async function fail({ db, now, onFailure }: SenderOptions, row: DueMail, error: Error) {
	const attempts = row.attempts + 1;
	const dead = attempts >= MOST_ATTEMPTS || isRefusedForGood(error);
	onFailure?.(row.messageId, error, dead);
	await mark(db, row.id, {
		attempts,
		lastError: error.message.slice(0, 500),
		...(dead
			? { state: 'dead' as const }
			: { notBefore: new Date(now().getTime() + retryDelay(attempts)) })
	});
}

async function mark(db: Database, id: string, values: Partial<typeof outbox.$inferInsert>) {
	await db.write((tx) =>
		tx
			.update(outbox)
			.set(values)
			.where(and(eq(outbox.id, id), eq(outbox.state, 'waiting')))
	);
}
