import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { startMailSink, type MailSink } from '../../src/lib/server/mail/sink';

export interface TestServer {
	/** `http://127.0.0.1:PORT`; send it as `Origin` with everything that is no GET. */
	readonly origin: string;
	/** Where it really listens, when `ORIGIN` was overridden. */
	readonly address: string;
	readonly databaseUrl: string;
	/** An SMTP server that keeps what it gets. */
	readonly mail: MailSink;
	/** What the server printed so far. */
	logs(): string;
	/** Ends the process at once, as a crash would; the database stays for `startServer({ folder })`. */
	kill(): Promise<void>;
	/** Stops it as an operator would, and removes its database. */
	stop(): Promise<void>;
	readonly folder: string;
}

export interface ServerOptions {
	readonly env?: Readonly<Record<string, string>>;
	/** The folder of an earlier server, to start on its database. */
	readonly folder?: string;
}

const START_LIMIT_MS = 60_000;
const STOP_LIMIT_MS = 15_000;

export async function freePort(): Promise<number> {
	const server = createServer();
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const address = server.address();
	await new Promise((resolve) => server.close(resolve));
	if (address === null || typeof address === 'string') throw new Error('no port to listen on');
	return address.port;
}

/**
 * Starts the production build on a free port with a database of its own, so that a test passes
 * through the real hooks, forms and headers. `npm test` builds before; by hand run `npm run build`.
 */
export async function startServer(options: ServerOptions = {}): Promise<TestServer> {
	if (!existsSync('build/index.js')) throw new Error('There is no build: run `npm run build`.');
	const folder = options.folder ?? mkdtempSync(join(tmpdir(), 'merestone-test-'));
	const mail = await startMailSink();
	const port = await freePort();
	const address = `http://127.0.0.1:${port}`;
	const env: Record<string, string> = {
		PATH: process.env.PATH ?? '',
		NODE_ENV: 'production',
		HOST: '127.0.0.1',
		PORT: String(port),
		ORIGIN: address,
		DATABASE_URL: `file:${join(folder, 'test.db')}`,
		SMTP_URL: mail.url,
		MERESTONE_SECRET: 'a secret of the tests, of no use elsewhere',
		MERESTONE_RATE_FACTOR: '1000',
		SHUTDOWN_TIMEOUT: '5',
		...options.env
	};
	const child = spawn(process.execPath, ['build/index.js'], { env, stdio: 'pipe' });
	let printed = '';
	const keep = (chunk: Buffer) => (printed += chunk.toString());
	child.stdout.on('data', keep);
	child.stderr.on('data', keep);

	const end = async (signal: NodeJS.Signals) => {
		await ended(child, signal);
		await mail.close();
	};
	try {
		await answers(address, child, () => printed);
	} catch (error) {
		await end('SIGKILL');
		throw error;
	}
	return {
		origin: env.ORIGIN ?? address,
		address,
		databaseUrl: env.DATABASE_URL ?? '',
		mail,
		folder,
		logs: () => printed,
		kill: () => end('SIGKILL'),
		async stop() {
			await end('SIGTERM');
			rmSync(folder, { recursive: true, force: true });
		}
	};
}

async function answers(address: string, child: ChildProcess, printed: () => string): Promise<void> {
	const start = Date.now();
	while (Date.now() - start < START_LIMIT_MS) {
		if (child.exitCode !== null) {
			throw new Error(`The server ended with ${child.exitCode}:\n${printed()}`);
		}
		const response = await fetch(`${address}/robots.txt`).catch(() => null);
		await response?.body?.cancel();
		if (response?.ok) return;
		await new Promise((resolve) => setTimeout(resolve, 50));
	}
	throw new Error(`The server did not start in time:\n${printed()}`);
}

async function ended(child: ChildProcess, signal: NodeJS.Signals): Promise<void> {
	if (child.exitCode !== null || child.signalCode !== null) return;
	const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()));
	child.kill(signal);
	const late = setTimeout(() => child.kill('SIGKILL'), STOP_LIMIT_MS);
	await gone;
	clearTimeout(late);
}
