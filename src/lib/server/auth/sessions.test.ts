import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { openDatabase, type OpenDatabase } from '../db/client';
import { sessions, users } from '../db/schema';
import { newId } from '../ids';
import {
	endOtherSessions,
	endSession,
	purgeSessions,
	sessionsOf,
	startSession,
	validateToken
} from './sessions';

const DAY_MS = 86_400_000;
const userId = newId();
let folder: string;
let opened: OpenDatabase;

beforeEach(async () => {
	vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T12:00:00Z') });
	folder = mkdtempSync(join(tmpdir(), 'merestone-sessions-'));
	opened = await openDatabase(`file:${join(folder, 'test.db')}`);
	await opened.db.write((tx) =>
		tx.insert(users).values({
			id: userId,
			email: 'ines@harrow.example',
			name: 'Ines Halloran',
			passwordHash: 'not a hash',
			createdAt: new Date()
		})
	);
});

afterEach(() => {
	opened.close();
	rmSync(folder, { recursive: true, force: true });
	vi.useRealTimers();
});

const later = (days: number) => vi.setSystemTime(Date.now() + days * DAY_MS);

describe('sessions', () => {
	it('are found by their token, of which only a hash is kept', async () => {
		const { db } = opened;
		const { token, sessionId } = await startSession(db, userId);
		expect(await validateToken(db, token)).toEqual({
			sessionId,
			actor: { id: userId, name: 'Ines Halloran', email: 'ines@harrow.example', isAdmin: false }
		});
		expect(await validateToken(db, sessionId)).toBeNull();
		expect(await validateToken(db, 'guessed')).toBeNull();
		expect(JSON.stringify(await db.read.select().from(sessions))).not.toContain(token);
	});

	it('end after seven days without a visit', async () => {
		const { token } = await startSession(opened.db, userId);
		later(6.9);
		expect(await validateToken(opened.db, token)).not.toBeNull();
		later(7.1);
		expect(await validateToken(opened.db, token)).toBeNull();
	});

	it('end after thirty days however often they are used', async () => {
		const { token } = await startSession(opened.db, userId);
		for (let day = 2; day < 30; day += 2) {
			later(2);
			expect(await validateToken(opened.db, token), `day ${day}`).not.toBeNull();
		}
		later(2);
		expect(await validateToken(opened.db, token)).toBeNull();
		expect(await opened.db.read.$count(sessions)).toBe(0);
	});

	it('can be listed, ended one by one, and all but one', async () => {
		const { db } = opened;
		const first = await startSession(db, userId);
		const second = await startSession(db, userId);
		const third = await startSession(db, userId);
		await endSession(db, first.sessionId);
		expect(await validateToken(db, first.token)).toBeNull();
		await endOtherSessions(db, userId, third.sessionId);
		expect(await validateToken(db, second.token)).toBeNull();
		expect((await sessionsOf(db, userId)).map(({ id }) => id)).toEqual([third.sessionId]);
	});

	it('are purged when they have run out', async () => {
		await startSession(opened.db, userId);
		later(8);
		await startSession(opened.db, userId);
		await purgeSessions(opened.db);
		expect(await opened.db.read.$count(sessions)).toBe(1);
	});
});
