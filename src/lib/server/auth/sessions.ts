import type { Actor } from '../context';
import type { Database } from '../db/client';
import { hashToken, newToken } from '../ids';
import { luciaFor, SESSION_LIMITS } from './lucia';

const DAY_MS = 86_400_000;

export interface StartedSession {
	/** For the cookie; the database keeps only its hash. */
	readonly token: string;
	readonly sessionId: string;
}

export async function startSession(db: Database, userId: string): Promise<StartedSession> {
	const token = newToken();
	const sessionId = hashToken(token);
	await luciaFor(db).createSession(userId, { createdAt: new Date() }, { sessionId });
	return { token, sessionId };
}

/** Who a cookie's token belongs to, or null; slides the session's end when half of it is over. */
export async function validateToken(
	db: Database,
	token: string
): Promise<{ actor: Actor; sessionId: string } | null> {
	const lucia = luciaFor(db);
	const { session, user } = await lucia.validateSession(hashToken(token));
	if (!session) return null;
	if (Date.now() - session.createdAt.getTime() >= SESSION_LIMITS.absoluteDays * DAY_MS) {
		await lucia.invalidateSession(session.id);
		return null;
	}
	const { id, name, email, isAdmin } = user;
	return { actor: { id, name, email, isAdmin }, sessionId: session.id };
}

export async function endSession(db: Database, sessionId: string): Promise<void> {
	await luciaFor(db).invalidateSession(sessionId);
}

export interface StoredSession {
	readonly id: string;
	readonly createdAt: Date;
	/** When it ends without another visit. */
	readonly expiresAt: Date;
}

export async function sessionsOf(db: Database, userId: string): Promise<StoredSession[]> {
	const found = await luciaFor(db).getUserSessions(userId);
	return found
		.map(({ id, createdAt, expiresAt }) => ({
			id,
			createdAt,
			expiresAt: new Date(
				Math.min(expiresAt.getTime(), createdAt.getTime() + SESSION_LIMITS.absoluteDays * DAY_MS)
			)
		}))
		.sort((a, b) => b.createdAt.getTime() - a.createdAt.getTime());
}

/** Ends every session of a user but one. */
export async function endOtherSessions(db: Database, userId: string, keep: string): Promise<void> {
	for (const { id } of await sessionsOf(db, userId)) {
		if (id !== keep) await endSession(db, id);
	}
}

/** Removes what has run out; called now and then by the background work. */
export async function purgeSessions(db: Database): Promise<void> {
	await luciaFor(db).deleteExpiredSessions();
}
