import type { Client } from '@libsql/client';
import { drizzle } from 'drizzle-orm/libsql';
import { migrate } from 'drizzle-orm/libsql/migrator';
import { readMigrationFiles } from 'drizzle-orm/migrator';
import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const TABLE = '__drizzle_migrations';

/** The drizzle/ folder above this file, wherever the bundler put it. */
export function migrationsFolder(): string {
	for (let folder = dirname(fileURLToPath(import.meta.url)); ; folder = dirname(folder)) {
		const candidate = join(folder, 'drizzle');
		if (existsSync(join(candidate, 'meta', '_journal.json'))) return candidate;
		if (folder === dirname(folder)) throw new Error('The folder drizzle/ is missing.');
	}
}

/**
 * Brings the database up to date and returns the hashes it applied. Drizzle's own migrator skips
 * a migration that is older than the last one and does not notice an edited one: both stop here.
 */
export async function applyMigrations(
	client: Client,
	folder = migrationsFolder()
): Promise<string[]> {
	const files = readMigrationFiles({ migrationsFolder: folder });
	files.reduce((previous, { folderMillis }) => {
		if (folderMillis <= previous) {
			throw new Error('The migrations in drizzle/meta/_journal.json are not in order of time.');
		}
		return folderMillis;
	}, 0);

	const applied = await appliedHashes(client);
	applied.forEach((hash, index) => {
		if (files[index]?.hash !== hash) {
			throw new Error(
				`Migration ${index} of this database is not the one in drizzle/: it was edited after it ` +
					'was applied, or the database belongs to another version of the product.'
			);
		}
	});
	if (applied.length === files.length) return [];
	await migrate(drizzle(client), { migrationsFolder: folder, migrationsTable: TABLE });
	return files.slice(applied.length).map(({ hash }) => hash);
}

async function appliedHashes(client: Client): Promise<string[]> {
	const table = await client.execute({
		sql: 'SELECT 1 FROM sqlite_master WHERE name = ?',
		args: [TABLE]
	});
	if (table.rows.length === 0) return [];
	const rows = await client.execute(`SELECT hash FROM ${TABLE} ORDER BY created_at`);
	return rows.rows.map((row) => String(row[0]));
}
