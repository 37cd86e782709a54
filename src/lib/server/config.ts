import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { z } from 'zod';
import { readStoreUrl } from './storage/store-url';

const switchOn = z
	.enum(['0', '1', 'false', 'true'], { error: 'expected 1 or 0' })
	.default('0')
	.transform((value) => value === '1' || value === 'true');

const address = (what: string, protocols: readonly string[]) =>
	z.string().refine((text) => URL.canParse(text) && protocols.includes(new URL(text).protocol), {
		error: `expected ${what}`
	});

const environment = z.object({
	/** Where the server listens; adapter-node reads it too. */
	PORT: z.coerce
		.number({ error: 'expected a port number' })
		.int('expected a whole number')
		.min(0, 'expected a port number')
		.max(65_535, 'expected a port number up to 65535')
		.default(3000),
	/** The address people type; cookies are Secure when it is https. */
	ORIGIN: address('an address such as https://merestone.example', ['http:', 'https:']).optional(),
	DATABASE_URL: z
		.string()
		.regex(/^file:.+/, { error: 'expected a file, such as file:data/merestone.db' })
		.default('file:data/merestone.db'),
	/** Where uploaded files are kept; left out: the folder `files` beside the database. */
	FILES_URL: z
		.string()
		.superRefine((text, context) => {
			try {
				readStoreUrl(text);
			} catch (error) {
				context.addIssue({ code: 'custom', message: error instanceof Error ? error.message : '' });
			}
		})
		.optional(),
	/** Left out: mail waits in the outbox. */
	SMTP_URL: address('an address such as smtp://localhost:1025', ['smtp:', 'smtps:']).optional(),
	MERESTONE_MAIL_FROM: z
		.string()
		.regex(/^[^\r\n]*[^\s@<>]+@[^\s@<>]+>?$/, {
			error: 'expected a sender such as Merestone <ledger@merestone.example>'
		})
		.default('Merestone <ledger@merestone.invalid>'),
	MERESTONE_SECRET: z
		.string()
		.min(32, 'expected at least 32 characters, for instance from: openssl rand -base64 32')
		.optional(),
	MERESTONE_DEMO: switchOn,
	/** Account ids, as shown on the account page: who sees the site's own pages. */
	MERESTONE_ADMINS: z
		.string()
		.default('')
		.transform((text) =>
			text
				.split(',')
				.map((id) => id.trim())
				.filter((id) => id !== '')
		)
		.refine((ids) => ids.every((id) => /^[0-9a-f-]{36}$/.test(id)), {
			error: 'expected account ids, separated by commas; each account page shows its own'
		}),
	/** `silent` to `trace`, as pino names them. */
	MERESTONE_LOG: z
		.enum(['silent', 'fatal', 'error', 'warn', 'info', 'debug', 'trace'], {
			error: 'expected one of silent, fatal, error, warn, info, debug, trace'
		})
		.default('info'),
	/** Multiplies every rate limit; tests raise it. */
	MERESTONE_RATE_FACTOR: z.coerce
		.number({ error: 'expected a number' })
		.min(1, 'expected 1 or more')
		.default(1),
	/** Solver threads; left out: one less than there are cores, at least one. */
	MERESTONE_THREADS: z.coerce
		.number({ error: 'expected a number' })
		.int('expected a whole number')
		.min(1, 'expected 1 to 64')
		.max(64, 'expected 1 to 64')
		.optional(),
	/** Seconds a recomputation may take. */
	MERESTONE_BUDGET_SECONDS: z.coerce
		.number({ error: 'expected seconds' })
		.min(1, 'expected at least 1')
		.max(3_600, 'expected at most 3600')
		.default(60)
});

export interface Config {
	readonly port: number;
	readonly origin: string;
	/** False when ORIGIN was left out and `origin` is a guess. */
	readonly originGiven: boolean;
	readonly secure: boolean;
	readonly databaseUrl: string;
	readonly filesUrl: string;
	readonly smtpUrl: string | null;
	readonly mailFrom: string;
	readonly secret: string;
	readonly demo: boolean;
	/** Accounts of the site's administrators. */
	readonly admins: readonly string[];
	readonly logLevel: string;
	readonly rateFactor: number;
	readonly threads: number | null;
	readonly budgetSeconds: number;
}

/** @throws Error that names each bad variable and what is expected of it */
export function readConfig(variables: Readonly<Record<string, string | undefined>>): Config {
	// An empty line in a file of settings means: not set.
	const given = Object.entries(variables).filter(([, value]) => value !== '');
	const parsed = environment.safeParse(Object.fromEntries(given));
	const problems = parsed.success
		? []
		: parsed.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`);
	const secret = parsed.data?.MERESTONE_SECRET ?? (parsed.data?.MERESTONE_DEMO ? DEMO_SECRET : '');
	if (parsed.success && secret === '') {
		problems.push(
			'MERESTONE_SECRET: expected at least 32 characters, for instance from: openssl rand -base64 32'
		);
	}
	if (!parsed.success || problems.length > 0) {
		throw new Error(`The configuration is not usable.\n  ${problems.join('\n  ')}`);
	}
	const values = parsed.data;
	const origin = new URL(values.ORIGIN ?? `http://localhost:${values.PORT}`).origin;
	return {
		port: values.PORT,
		origin,
		originGiven: values.ORIGIN !== undefined,
		secure: origin.startsWith('https:'),
		databaseUrl: values.DATABASE_URL,
		filesUrl: values.FILES_URL ?? filesBeside(values.DATABASE_URL),
		smtpUrl: values.SMTP_URL ?? null,
		mailFrom: values.MERESTONE_MAIL_FROM,
		secret,
		demo: values.MERESTONE_DEMO,
		admins: values.MERESTONE_ADMINS,
		logLevel: values.MERESTONE_LOG,
		rateFactor: values.MERESTONE_RATE_FACTOR,
		threads: values.MERESTONE_THREADS ?? null,
		budgetSeconds: values.MERESTONE_BUDGET_SECONDS
	};
}

function filesBeside(databaseUrl: string): string {
	return `file:${join(dirname(databaseUrl.replace(/^file:(\/\/)?/, '')), 'files')}`;
}

/** The demo holds invented data only; anything else has to bring a secret of its own. */
const DEMO_SECRET = 'the demo holds invented data and keeps no secret';

let current: Config | undefined;

/** The process's configuration: its environment, with what is missing taken from `.env`. */
export function config(): Config {
	if (!current) {
		if (existsSync('.env')) process.loadEnvFile('.env');
		current = readConfig(process.env);
	}
	return current;
}
