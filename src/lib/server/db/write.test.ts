import { createClient } from '@libsql/client';
import { eq, sql } from 'drizzle-orm';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { newId } from '../ids';
import { openDatabase, type OpenDatabase } from './client';
import { users } from './schema';
import { createWriteQueue, isBusy, isUniqueViolation } from './write';

let folder: string;
let url: string;
const closing: (() => void)[] = [];

beforeEach(() => {
	folder = mkdtempSync(join(tmpdir(), 'merestone-db-'));
	url = `file:${join(folder, 'test.db')}`;
});

afterEach(() => {
	for (const close of closing.splice(0)) close();
	rmSync(folder, { recursive: true, force: true });
});

async function open(): Promise<OpenDatabase> {
	const opened = await openDatabase(url);
	closing.push(() => opened.close());
	return opened;
}

function client() {
	const raw = createClient({ url, concurrency: 1, timeout: 0 });
	closing.push(() => raw.close());
	return raw;
}

const person = (email: string) => ({
	id: newId(),
	email,
	name: 'Ines Arden',
	passwordHash: 'not a hash',
	createdAt: new Date()
});

async function usersOnDisk(): Promise<number> {
	const result = await client().execute('SELECT count(*) FROM users');
	return Number(result.rows[0]?.[0]);
}

/** Holds the write lock from another connection, as another process would. */
async function holdLock(ms: number): Promise<void> {
	const holder = await client().transaction('write');
	await holder.execute('UPDATE users SET name = name');
	setTimeout(() => void holder.rollback(), ms);
}

describe('the lost-write trap of libSQL files (libsql-client-ts issue 352)', () => {
	it('loses writes that the raw client reported as done', async () => {
		await open();
		const raw = client();
		const insert = (email: string) => {
			const row = person(email);
			return raw.execute({
				sql: 'INSERT INTO users (id, email, name, password_hash, created_at) VALUES (?, ?, ?, ?, ?)',
				args: [row.id, row.email, row.name, row.passwordHash, 0]
			});
		};
		const holder = await client().transaction('write');
		await expect(insert('first@reader.example')).rejects.toSatisfy(isBusy);
		await holder.rollback();
		let reported = 0;
		for (let i = 0; i < 20; i++) {
			await insert(`later-${i}@reader.example`).then(
				() => reported++,
				() => undefined
			);
		}
		raw.close();
		// When this fails the driver has been repaired and the reconnection is no longer needed.
		expect(await usersOnDisk()).toBeLessThan(20);
		expect(reported).toBeGreaterThan(await usersOnDisk());
	});

	it('loses none through our queue', async () => {
		const { db } = await open();
		await holdLock(150);
		await Promise.all(
			Array.from({ length: 60 }, (_, i) =>
				db.write((tx) => tx.insert(users).values(person(`reader-${i}@group.example`)))
			)
		);
		expect(await usersOnDisk()).toBe(60);
		expect(await db.read.$count(users)).toBe(60);
	});
});

describe('the write queue', () => {
	it('keeps overlapping read-modify-write transactions apart', async () => {
		const { db } = await open();
		const row = person('counter@group.example');
		await db.write((tx) => tx.insert(users).values({ ...row, name: '0' }));
		await Promise.all(
			Array.from({ length: 50 }, () =>
				db.write(async (tx) => {
					const [found] = await tx.select().from(users).where(eq(users.id, row.id));
					await new Promise((resolve) => setTimeout(resolve, 1));
					await tx
						.update(users)
						.set({ name: String(Number(found?.name) + 1) })
						.where(eq(users.id, row.id));
				})
			)
		);
		const [after] = await db.read.select().from(users).where(eq(users.id, row.id));
		expect(after?.name).toBe('50');
	});

	it('takes everything back when the work throws, and goes on', async () => {
		const { db } = await open();
		await expect(
			db.write(async (tx) => {
				await tx.insert(users).values(person('gone@group.example'));
				throw new Error('stop here');
			})
		).rejects.toThrow('stop here');
		await db.write((tx) => tx.insert(users).values(person('kept@group.example')));
		expect((await db.read.select().from(users)).map(({ email }) => email)).toEqual([
			'kept@group.example'
		]);
	});

	it('names a broken unique index', async () => {
		const { db } = await open();
		await db.write((tx) => tx.insert(users).values(person('one@group.example')));
		await expect(
			db.write((tx) => tx.insert(users).values(person('one@group.example')))
		).rejects.toSatisfy(isUniqueViolation);
	});

	it('refuses a write inside a write instead of waiting for ever', async () => {
		const { db } = await open();
		await expect(db.write(() => db.write(async () => 1))).rejects.toThrow('inside a write');
	});

	it('lets work that outlives its turn write', async () => {
		const enqueue = createWriteQueue(() => undefined);
		let late: Promise<number> | undefined;
		await enqueue(async () => {
			late = new Promise((resolve) => setTimeout(resolve, 10)).then(() => enqueue(async () => 7));
		});
		await expect(late).resolves.toBe(7);
	});

	it('gives up with the error of the lock when it is held too long', async () => {
		let reconnections = 0;
		const enqueue = createWriteQueue(() => void reconnections++, [1, 1, 1]);
		const busy = Object.assign(new Error('locked'), { code: 'SQLITE_BUSY' });
		await expect(enqueue(() => Promise.reject(busy))).rejects.toBe(busy);
		expect(reconnections).toBe(4);
	});
});

describe('opening the database', () => {
	it('enforces foreign keys, writes ahead and migrates once', async () => {
		const first = await open();
		expect(first.migrations.length).toBeGreaterThan(0);
		const second = await open();
		expect(second.migrations).toEqual([]);
		const raw = client();
		expect((await raw.execute('PRAGMA journal_mode')).rows[0]?.[0]).toBe('wal');
		await expect(
			first.db.write((tx) =>
				tx.run(
					sql`INSERT INTO sessions (id, user_id, expires_at, created_at) VALUES ('a', 'b', 1, 1)`
				)
			)
		).rejects.toThrow();
	});

	it('refuses a database whose migrations are not ours', async () => {
		(await open()).close();
		await client().execute("UPDATE __drizzle_migrations SET hash = 'edited'");
		await expect(openDatabase(url)).rejects.toThrow('not the one in drizzle/');
	});

	it('refuses an address that is no file', async () => {
		await expect(openDatabase('libsql://elsewhere.example')).rejects.toThrow('file:');
	});
});
