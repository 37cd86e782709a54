import { DrizzleSQLiteAdapter } from '@lucia-auth/adapter-drizzle';
import { eq } from 'drizzle-orm';
import { Lucia, TimeSpan, type Adapter, type DatabaseSession } from 'lucia';
import type { Database } from '../db/client';
import { sessions, users } from '../db/schema';

/** Sessions end after a week without a visit, whatever happens after thirty days (AAL1 of NIST SP 800-63B-4). */
export const SESSION_LIMITS = { idleDays: 7, absoluteDays: 30 } as const;

/** The session library's storage, its writes through the one queue. */
class QueuedAdapter implements Adapter {
	constructor(private readonly db: Database) {}

	async getSessionAndUser(sessionId: string): ReturnType<Adapter['getSessionAndUser']> {
		const [row] = await this.db.read
			.select({ session: sessions, user: users })
			.from(sessions)
			.innerJoin(users, eq(users.id, sessions.userId))
			.where(eq(sessions.id, sessionId));
		if (!row) return [null, null];
		const { id, name, email, isAdmin } = row.user;
		return [stored(row.session), { id, attributes: { name, email, isAdmin } }];
	}

	async getUserSessions(userId: string): Promise<DatabaseSession[]> {
		const rows = await this.db.read.select().from(sessions).where(eq(sessions.userId, userId));
		return rows.map(stored);
	}

	setSession(session: DatabaseSession): Promise<void> {
		return this.write((adapter) => adapter.setSession(session));
	}

	updateSessionExpiration(sessionId: string, expiresAt: Date): Promise<void> {
		return this.write((adapter) => adapter.updateSessionExpiration(sessionId, expiresAt));
	}

	deleteSession(sessionId: string): Promise<void> {
		return this.write((adapter) => adapter.deleteSession(sessionId));
	}

	deleteUserSessions(userId: string): Promise<void> {
		return this.write((adapter) => adapter.deleteUserSessions(userId));
	}

	deleteExpiredSessions(): Promise<void> {
		return this.write((adapter) => adapter.deleteExpiredSessions());
	}

	private write(work: (adapter: DrizzleSQLiteAdapter) => Promise<void>): Promise<void> {
		return this.db.write((tx) => work(new DrizzleSQLiteAdapter(tx, sessions, users)));
	}
}

function stored(row: typeof sessions.$inferSelect): DatabaseSession {
	return {
		id: row.id,
		userId: row.userId,
		expiresAt: new Date(row.expiresAt * 1000),
		attributes: { createdAt: row.createdAt }
	};
}

function createLucia(db: Database) {
	return new Lucia(new QueuedAdapter(db), {
		sessionExpiresIn: new TimeSpan(SESSION_LIMITS.idleDays, 'd'),
		getSessionAttributes: ({ createdAt }) => ({ createdAt }),
		getUserAttributes: ({ name, email, isAdmin }) => ({ name, email, isAdmin })
	});
}

declare module 'lucia' {
	interface Register {
		Lucia: ReturnType<typeof createLucia>;
		DatabaseSessionAttributes: { createdAt: Date };
		DatabaseUserAttributes: { name: string; email: string; isAdmin: boolean };
	}
}

const instances = new WeakMap<Database, ReturnType<typeof createLucia>>();

/** The session library for a database; only auth/ uses it. */
export function luciaFor(db: Database): ReturnType<typeof createLucia> {
	const lucia = instances.get(db) ?? createLucia(db);
	instances.set(db, lucia);
	return lucia;
}
