import { createClient, type Client } from '@libsql/client';
import { drizzle, type LibSQLDatabase } from 'drizzle-orm/libsql';
import { mkdirSync } from 'node:fs';
import { dirname, resolve } from 'node:path';
import { applyMigrations } from './migrate';
import * as schema from './schema';
import { createWriteQueue } from './write';

type Drizzle = LibSQLDatabase<typeof schema>;

/** Inside `write`: reads and writes of one transaction. */
export type Transaction = Parameters<Parameters<Drizzle['transaction']>[0]>[0];

/** What may be asked outside a transaction; a `Transaction` is one too. */
export type Reader = Pick<
	Drizzle,
	'select' | 'selectDistinct' | '$with' | 'with' | '$count' | 'query'
>;

export interface Database {
	/** Reads the last committed state; needs no queue. */
	readonly read: Reader;
	/**
	 * Runs `work` in one transaction, after all writes before it: all of it or, when it throws,
	 * nothing. It may run again from the start when another process held the lock, so it has no
	 * effect outside the transaction; nothing slow belongs in it, and no second `write`.
	 */
	write<T>(work: (tx: Transaction) => Promise<T>): Promise<T>;
}

export interface OpenDatabase {
	readonly db: Database;
	/** What opening found and did, for the log. */
	readonly migrations: readonly string[];
	close(): void;
}

/**
 * Opens (and creates) the database file, applies what is missing of drizzle/, and checks that
 * foreign keys are enforced, the journal is a write-ahead log and the file is whole.
 * @param url `file:data/merestone.db`; only files, since the recovery is that of local files
 * @throws Error that names what is wrong with the file or the migrations
 */
export async function openDatabase(url: string): Promise<OpenDatabase> {
	if (!url.startsWith('file:')) throw new Error(`DATABASE_URL must start with file:, not ${url}`);
	mkdirSync(dirname(resolve(url.slice('file:'.length).replace(/^\/\//, ''))), { recursive: true });

	// No busy timeout: the binding waits synchronously and would stop the whole server.
	const writer = createClient({ url, concurrency: 1, timeout: 0 });
	let reader: Client | undefined;
	try {
		const journal = await writer.execute('PRAGMA journal_mode = WAL');
		if (journal.rows[0]?.[0] !== 'wal') throw new Error('The database file refuses WAL mode.');
		const migrations = await applyMigrations(writer);
		await assertWhole(writer);
		reader = createClient({ url, concurrency: 4, timeout: 0 });

		const writing = drizzle(writer, { schema });
		const reading = drizzle(reader, { schema });
		const enqueue = createWriteQueue(() => writer.reconnect());
		const opened = reader;
		return {
			db: {
				read: reading,
				write: (work) => enqueue(() => writing.transaction(work, { behavior: 'immediate' }))
			},
			migrations,
			close() {
				opened.close();
				writer.close();
			}
		};
	} catch (error) {
		reader?.close();
		writer.close();
		throw error;
	}
}

async function assertWhole(client: Client): Promise<void> {
	const enforced = await client.execute('PRAGMA foreign_keys');
	if (Number(enforced.rows[0]?.[0]) !== 1) throw new Error('Foreign keys are not enforced.');
	const broken = await client.execute('PRAGMA foreign_key_check');
	if (broken.rows.length > 0) {
		throw new Error(`${broken.rows.length} rows point to rows that do not exist.`);
	}
	const check = await client.execute('PRAGMA quick_check(1)');
	if (check.rows[0]?.[0] !== 'ok') {
		throw new Error(`The database file is damaged: ${String(check.rows[0]?.[0])}`);
	}
}
