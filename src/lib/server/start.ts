import { openApplication } from './application';
import { config } from './config';
import { log } from './log';

/** Runs once before the first request: configuration, database, background work. */
export async function startServer(): Promise<void> {
	const { origin, secure, databaseUrl, demo, smtpUrl } = config();
	const { migrations } = await openApplication();
	log().info({ origin, database: databaseUrl, migrations: migrations.length, demo }, 'starting');
	if (!secure && !demo) {
		log().warn('ORIGIN is plain http: cookies go without __Host- and Secure');
	}
	if (!smtpUrl) log().warn('SMTP_URL is not set: mail waits in the outbox');
	await startBackgroundWork();
}

/** jobs/index.ts starts the solver threads and the outbox, and stops them with the server. */
async function startBackgroundWork(): Promise<void> {
	const modules = import.meta.glob<{ startBackground(): Promise<void> | void }>('./jobs/index.ts');
	for (const load of Object.values(modules)) await (await load()).startBackground();
}
