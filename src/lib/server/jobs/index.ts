import { dirname, join, resolve } from 'node:path';
import { openedDatabase } from '../application';
import { config } from '../config';
import type { Database } from '../db/client';
import { log } from '../log';
import { setMailSink } from '../mail/caught-mails';
import { sendDueMails } from '../mail/sender';
import { createSmtpTransport, type MailTransport } from '../mail/transport';
import { closeReferences, warmReferences } from '../references/read-reference';
import { deriveTouchedClaims } from '../services/claims/derive-claim';
import { sweepOrphans } from '../services/evidence-files/sweep-orphans';
import { queueDigests } from '../services/notifications/queue-digests';
import { sendDueReminders } from '../services/notifications/send-due-reminders';
import { ensureCatalogue } from '../services/inequalities/ensure-catalogue';
import { upgradeDigests } from '../services/inequalities/upgrade-digests';
import { renewStations } from '../services/recomputations/renew-stations';
import { setBudgetSeconds } from '../services/recomputations/budget';
import { closeFileStore, fileStore } from '../storage/open-store';
import { closeSolverPool, setSolverPool, solverPool } from './current-pool';
import { reap } from './lease';
import { createThreadPool, threadCount } from './pool';
import { startRunner, type Runner } from './runner';
import { onHint } from './signal';

const REAP_EVERY_MS = 15_000;
const MAIL_EVERY_MS = 2_000;
/** Due dates and digests are matters of days and hours. */
const REMIND_EVERY_MS = 300_000;
const SWEEP_EVERY_MS = 3_600_000;

interface Background {
	readonly runner: Runner;
	stop(): Promise<void>;
}

/** On globalThis, because the development server evaluates this module anew after a change. */
const holder: { merestoneBackground?: Promise<Background> | undefined } = globalThis as never;

/** Starts the solver threads' runner, the reaper and the outbox; once per process. */
export async function startBackground(): Promise<void> {
	if (!holder.merestoneBackground) {
		holder.merestoneBackground = start();
		// adapter-node emits it after the last request and waits for what it starts.
		process.once('sveltekit:shutdown', () => void stopBackground());
	}
	await holder.merestoneBackground;
}

/** Puts running work back into the queue, lets a mail being sent end, and frees the threads. */
export async function stopBackground(): Promise<void> {
	const background = await holder.merestoneBackground;
	holder.merestoneBackground = undefined;
	await background?.stop();
}

async function start(): Promise<Background> {
	const settings = config();
	const db = openedDatabase();
	const now = () => new Date();
	setBudgetSeconds(settings.budgetSeconds);
	setSolverPool(createThreadPool(settings.threads ?? threadCount()));
	await takeBack(db, now(), true);

	const runner = startRunner({ db, pool: await solverPool(), log: log(), now });
	const forget = onHint((hint) => (hint.kind === 'stop' ? runner.cancel(hint.id) : runner.wake()));
	const reaper = every(REAP_EVERY_MS, 'taking back lost runs', () => takeBack(db, now(), false));
	const mail = await startMail(db, now);
	const reminders = every(REMIND_EVERY_MS, 'reminding', () => remind(db, now()), true);
	const sweep = every(SWEEP_EVERY_MS, 'sweeping unused files', () => sweepFiles(db, now()));
	void warmUp(db, () => runner.wake());
	return {
		runner,
		async stop() {
			forget();
			await Promise.all([
				reaper.stop(),
				reminders.stop(),
				mail.stop(),
				sweep.stop(),
				runner.stop()
			]);
			await Promise.all([closeSolverPool(), closeReferences(), closeFileStore()]);
		}
	};
}

/** Puts lost runs back into the queue and judges the claims of those that are given up. */
async function takeBack(db: Database, now: Date, all: boolean): Promise<void> {
	const count = await db.write(async (tx) => {
		const given = await reap(tx, now, all);
		for (const id of given) await deriveTouchedClaims(tx, id, now);
		return given.length;
	});
	if (count > 0) log().error({ count }, 'recomputations given up after repeated crashes');
}

/** Files that no submission names. */
async function sweepFiles(db: Database, now: Date): Promise<void> {
	const { deleted, refused } = await sweepOrphans(db, await fileStore(), now);
	if (deleted > 0) log().info({ deleted }, 'unused files deleted');
	if (refused) log().error('FILES_URL holds many files this database does not know: none deleted');
}

/** Both write only what was not written before, so that a restart tells nothing twice. */
async function remind(db: Database, now: Date): Promise<void> {
	await sendDueReminders(db, now);
	await queueDigests(db, now);
}

/** Slow beginnings, after the server has begun to answer. */
async function warmUp(db: Database, wake: () => void): Promise<void> {
	try {
		await warmReferences();
		await bringUpToDate(db, wake);
		await ensureCatalogue(db);
	} catch (error) {
		log().warn({ err: error }, 'warming up failed');
	}
}

/**
 * What a better digest or a newer solver asks for once. Each step is a transaction of its own, so that
 * a start that is cut short is taken up by the next.
 */
async function bringUpToDate(db: Database, wake: () => void): Promise<void> {
	const { upgraded, merged, failed } = await upgradeDigests(db, () => new Date());
	if (upgraded + merged > 0) log().info({ upgraded, merged }, 'inequalities given a better digest');
	if (Object.keys(failed).length > 0) {
		log().error({ failed }, 'inequalities keep an earlier digest; the next start tries again');
	}
	const renewed = await renewStations(db);
	if (renewed > 0) log().info({ renewed }, 'stations queued for the newer solver');
	wake();
}

async function startMail(db: Database, now: () => Date): Promise<{ stop(): Promise<void> }> {
	const { smtpUrl, mailFrom, origin, demo, databaseUrl } = config();
	let url = smtpUrl;
	let closeSink = (): Promise<void> => Promise.resolve();
	if (!url && demo) {
		// The demo keeps the mail it would send, beside its database.
		const { startMailSink } = await import('../mail/sink');
		const file = resolve(databaseUrl.replace(/^file:/, ''));
		const sink = await startMailSink(join(dirname(file), 'mail'));
		setMailSink(sink);
		url = sink.url;
		closeSink = () => sink.close();
	}
	if (!url) return { stop: closeSink };
	const transport: MailTransport = createSmtpTransport(url, mailFrom);
	const stopping = new AbortController();
	const timer = every(MAIL_EVERY_MS, 'sending mail', async () => {
		await sendDueMails({
			db,
			transport,
			origin,
			now,
			signal: stopping.signal,
			onFailure: (messageId, error, dead) =>
				log()[dead ? 'error' : 'warn'](
					{ messageId, err: error },
					dead ? 'mail given up' : 'mail later'
				)
		});
	});
	return {
		async stop() {
			stopping.abort();
			await timer.stop();
			transport.close();
			await closeSink();
		}
	};
}

/** Runs work again and again, never twice at the same time. */
function every(
	ms: number,
	what: string,
	work: () => Promise<void>,
	atOnce = false
): { stop(): Promise<void> } {
	let current: Promise<void> | null = null;
	const turn = () => {
		current ??= work()
			.catch((error: unknown) => log().error({ err: error }, `${what} failed`))
			.finally(() => {
				current = null;
			});
	};
	const timer = setInterval(turn, ms);
	if (atOnce) turn();
	return {
		async stop() {
			clearInterval(timer);
			await current;
		}
	};
}
