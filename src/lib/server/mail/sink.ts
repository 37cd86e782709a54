import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import type { CaughtMailView } from '../../schemas/mail-views';
import { newId } from '../ids';

const LARGEST_MAIL = 1_000_000;
const MOST_KEPT = 500;

export interface MailSink {
	readonly url: string;
	/** What was caught, newest first. */
	caught(): readonly CaughtMailView[];
	close(): Promise<void>;
}

/**
 * An SMTP server on this machine that keeps every mail and delivers none: for the demo, which shows
 * them at /demo/mail, and for tests.
 * @param folder where to keep them over a restart; left out: in memory only
 */
export async function startMailSink(folder?: string, port = 0): Promise<MailSink> {
	const mails: CaughtMailView[] = [];
	const keep = (mail: CaughtMailView) => {
		mails.unshift(mail);
		mails.length = Math.min(mails.length, MOST_KEPT);
	};
	if (folder) {
		mkdirSync(folder, { recursive: true });
		const files = readdirSync(folder).filter((name) => name.endsWith('.eml'));
		for (const name of files.sort().slice(-MOST_KEPT)) {
			keep(await read(name.replace(/\.eml$/, ''), readFileSync(join(folder, name))));
		}
	}
	const server = new SMTPServer({
		authOptional: true,
		disabledCommands: ['AUTH', 'STARTTLS'],
		size: LARGEST_MAIL,
		onData(stream, _session, done) {
			const chunks: Buffer[] = [];
			stream.on('data', (chunk: Buffer) => chunks.push(chunk));
			stream.on('error', done);
			stream.on('end', () => {
				const raw = Buffer.concat(chunks);
				const id = newId();
				if (folder) writeFileSync(join(folder, `${id}.eml`), raw);
				read(id, raw).then(
					(mail) => {
						keep(mail);
						done();
					},
					(error: unknown) => done(error instanceof Error ? error : new Error(String(error)))
				);
			});
		}
	});
	await new Promise<void>((resolve, reject) => {
		server.once('error', reject);
		server.listen(port, '127.0.0.1', () => resolve());
	});
	const address = server.server.address();
	const chosen = typeof address === 'object' && address ? address.port : port;
	return {
		url: `smtp://127.0.0.1:${chosen}`,
		caught: () => mails,
		close: () => new Promise((resolve) => server.close(() => resolve()))
	};
}

async function read(id: string, raw: Buffer): Promise<CaughtMailView> {
	const parsed = await simpleParser(raw, { skipHtmlToText: true });
	const recipients = Array.isArray(parsed.to) ? parsed.to : parsed.to ? [parsed.to] : [];
	return {
		id,
		at: (parsed.date ?? new Date(0)).toISOString(),
		from: parsed.from?.text ?? '',
		to: recipients
			.flatMap(({ value }) => value)
			.map(({ name, address }) => (name ? `${name} <${address ?? ''}>` : (address ?? '')))
			.join(', '),
		subject: parsed.subject ?? '',
		text: parsed.text ?? ''
	};
}
