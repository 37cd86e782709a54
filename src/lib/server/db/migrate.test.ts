import { createClient } from '@libsql/client';
import { is } from 'drizzle-orm';
import { getTableConfig, SQLiteTable } from 'drizzle-orm/sqlite-core';
import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { applyMigrations, migrationsFolder } from './migrate';
import * as schema from './schema';

let folder: string;
let client: ReturnType<typeof createClient>;

beforeEach(() => {
	folder = mkdtempSync(join(tmpdir(), 'merestone-migrate-'));
	client = createClient({ url: `file:${join(folder, 'test.db')}`, concurrency: 1 });
});
afterEach(() => {
	client.close();
	rmSync(folder, { recursive: true, force: true });
});

const tables = Object.values(schema)
	.filter((value) => is(value, SQLiteTable))
	.map((table) => getTableConfig(table));

describe('the migrations', () => {
	it('make exactly the tables, columns and indexes the code has', async () => {
		await applyMigrations(client);
		const names = await client.execute(
			"SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE '\\_\\_%' ESCAPE '\\'"
		);
		expect(names.rows.map((row) => row.name).sort()).toEqual(tables.map(({ name }) => name).sort());
		for (const { name, columns, indexes } of tables) {
			const made = await client.execute(`PRAGMA table_info("${name}")`);
			const found = made.rows.map((row) => [row.name, Number(row.notnull) === 1]);
			const expected = columns.map((column) => [column.name, column.notNull]);
			expect(found.sort(), name).toEqual(expected.sort());
			const list = await client.execute(`PRAGMA index_list("${name}")`);
			const made_ = list.rows.filter((row) => row.origin === 'c').map((row) => row.name);
			expect(made_, name).toEqual(expect.arrayContaining(indexes.map(({ config }) => config.name)));
		}
	});

	it('are in order of time, or a start is refused', async () => {
		const copy = join(folder, 'drizzle');
		cpSync(migrationsFolder(), copy, { recursive: true });
		const file = join(copy, 'meta', '_journal.json');
		const journal: { entries: { idx: number; when: number; tag: string }[] } = JSON.parse(
			readFileSync(file, 'utf8')
		);
		const last = journal.entries.at(-1);
		if (!last) throw new Error('no migration');
		// Drizzle itself would skip this one without a word.
		const older = { ...last, idx: last.idx + 1, when: last.when - 1, tag: '9999_older' };
		writeFileSync(join(copy, '9999_older.sql'), 'CREATE TABLE `older` (`id` text);');
		writeFileSync(file, JSON.stringify({ ...journal, entries: [...journal.entries, older] }));
		await expect(applyMigrations(client, copy)).rejects.toThrow('not in order of time');
	});

	it('keep the rows they find', async () => {
		await applyMigrations(client);
		await client.execute(
			"INSERT INTO users (id, email, name, password_hash, created_at) VALUES ('u', 'a@b.example', 'A', 'x', 1)"
		);
		const copy = join(folder, 'drizzle');
		cpSync(migrationsFolder(), copy, { recursive: true });
		const file = join(copy, 'meta', '_journal.json');
		const journal: { entries: { when: number }[] } = JSON.parse(readFileSync(file, 'utf8'));
		const next = {
			...journal.entries.at(-1),
			idx: journal.entries.length,
			when: (journal.entries.at(-1)?.when ?? 0) + 1,
			tag: '9999_next'
		};
		writeFileSync(join(copy, '9999_next.sql'), 'CREATE TABLE `next` (`id` text);');
		writeFileSync(file, JSON.stringify({ ...journal, entries: [...journal.entries, next] }));
		expect(await applyMigrations(client, copy)).toHaveLength(1);
		expect((await client.execute('SELECT name FROM users')).rows).toHaveLength(1);
		expect(
			(await client.execute('SELECT name FROM sqlite_master')).rows.map(({ name }) => name)
		).toContain('next');
	});

	it('set results apart, with a summary of each beside its run', async () => {
		const copy = join(folder, 'drizzle');
		cpSync(migrationsFolder(), copy, { recursive: true });
		const file = join(copy, 'meta', '_journal.json');
		const journal: { entries: unknown[] } = JSON.parse(readFileSync(file, 'utf8'));
		writeFileSync(file, JSON.stringify({ ...journal, entries: journal.entries.slice(0, 1) }));
		await applyMigrations(client, copy);
		const whole = (certificate: unknown) => ({ problem: { terms: [] }, lower: 2, certificate });
		const runs = {
			local: whole({ kind: 'deterministic-strategy', strategy: [[0]] }),
			quantum: whole({ kind: 'enclosure', lower: {}, upper: {}, upperLevel: { perParty: 1 } }),
			value: whole(null)
		};
		for (const [id, result] of Object.entries({ ...runs, queued: null })) {
			await client.execute({
				sql: 'INSERT INTO recomputations (id, problem_hash, problem, result, created_at) VALUES (?, ?, ?, ?, 1)',
				args: [id, id, '{}', result && JSON.stringify(result)]
			});
		}
		await applyMigrations(client);
		const summaries = await client.execute('SELECT id, summary FROM recomputations ORDER BY id');
		expect(summaries.rows.map(({ id, summary }) => [id, JSON.parse(String(summary))])).toEqual([
			['local', { lower: 2, certificate: { kind: 'deterministic-strategy' } }],
			['quantum', { lower: 2, certificate: { kind: 'enclosure', upperLevel: { perParty: 1 } } }],
			['queued', null],
			['value', { lower: 2, certificate: null }]
		]);
		const stored = await client.execute('SELECT recomputation_id, result FROM results');
		expect(
			Object.fromEntries(
				stored.rows.map((row) => [row.recomputation_id, JSON.parse(String(row.result))])
			)
		).toEqual(runs);
	});
});
