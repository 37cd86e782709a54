import { openApplication } from './application';
import { purgeSessions } from './auth/sessions';
import { config } from './config';
import type { Database } from './db/client';
import { startBackground } from './jobs';
import { log } from './log';

const PURGE_EVERY_MS = 3_600_000;

/** Runs once before the first request: configuration, database, background work. */
export async function startServer(): Promise<void> {
	const { origin, secure, databaseUrl, demo, smtpUrl } = config();
	const { db, migrations } = await openApplication();
	log().info({ origin, database: databaseUrl, migrations: migrations.length, demo }, 'starting');
	if (!secure && !demo) {
		log().warn('ORIGIN is plain http: cookies go without __Host- and Secure');
	}
	if (!smtpUrl && !demo) log().warn('SMTP_URL is not set: mail waits in the outbox');
	await startBackground();
	await purge(db);
	setInterval(() => void purge(db), PURGE_EVERY_MS).unref();
}

async function purge(db: Database): Promise<void> {
	await purgeSessions(db).catch((error: unknown) =>
		log().error({ err: error }, 'purging sessions failed')
	);
}
