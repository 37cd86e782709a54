import { createServer } from 'node:net';
import { openApplication } from './application';
import { purgeSessions } from './auth/sessions';
import { config } from './config';
import type { Database } from './db/client';
import { setHeadersOfEveryAnswer } from './http/every-answer';
import { startBackground } from './jobs';
import { log } from './log';
import { applyAdmins } from './services/users/apply-admins';
import { fileStore } from './storage/open-store';

const PURGE_EVERY_MS = 3_600_000;

/**
 * Runs once before the first request: configuration, database, background work. In production
 * whatever stands in the way ends the process with one sentence that says so.
 */
export async function startServer(): Promise<void> {
	try {
		await start();
	} catch (error) {
		if (import.meta.env.DEV) throw error;
		console.error(error instanceof Error ? error.message : error);
		process.exit(1);
	}
}

async function start(): Promise<void> {
	const { origin, secure, databaseUrl, demo, smtpUrl } = config();
	if (!import.meta.env.DEV) await assertPortIsFree();
	const { db, migrations } = await openApplication();
	log().info({ origin, database: databaseUrl, migrations: migrations.length, demo }, 'starting');
	if (!secure && !demo) {
		log().warn('ORIGIN is plain http: cookies go without __Host- and Secure');
	}
	if (!smtpUrl && !demo) log().warn('SMTP_URL is not set: mail waits in the outbox');
	await fileStore();
	await nameAdmins(db);
	setHeadersOfEveryAnswer();
	await startBackground();
	await purge(db);
	setInterval(() => void purge(db), PURGE_EVERY_MS).unref();
}

/** adapter-node listens only afterwards: a second process must not open the database before. */
async function assertPortIsFree(): Promise<void> {
	if (process.env.SOCKET_PATH || process.env.LISTEN_FDS) return;
	const { port } = config();
	const probe = createServer();
	await new Promise<void>((resolve, reject) => {
		probe.once('error', (error: NodeJS.ErrnoException) =>
			reject(
				error.code === 'EADDRINUSE'
					? new Error(`Port ${port} is taken: stop what listens there, or set PORT to another.`)
					: error
			)
		);
		probe.listen(port, process.env.HOST ?? '0.0.0.0', () => probe.close(() => resolve()));
	});
}

/** Who administers the site is said by its operator only, at every start. */
async function nameAdmins(db: Database): Promise<void> {
	const { admins, unknown } = await applyAdmins(db, config().admins, new Date());
	if (admins.length > 0) log().info({ admins }, 'administrators of the site');
	if (unknown.length > 0) log().warn({ unknown }, 'MERESTONE_ADMINS names ids of no account');
}

async function purge(db: Database): Promise<void> {
	await purgeSessions(db).catch((error: unknown) =>
		log().error({ err: error }, 'purging sessions failed')
	);
}
