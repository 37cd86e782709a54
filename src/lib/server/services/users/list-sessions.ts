import type { SessionView } from '../../../schemas/views';
import { sessionsOf } from '../../auth/sessions';
import type { UserContext } from '../../context';

/** The places where one is signed in, newest first. */
export async function listSessions(
	ctx: UserContext,
	current: string | null
): Promise<readonly SessionView[]> {
	return (await sessionsOf(ctx.db, ctx.actor.id)).map(({ id, createdAt, expiresAt }) => ({
		id: sessionHandle(id),
		startedAt: createdAt.toISOString(),
		expiresAt: expiresAt.toISOString(),
		current: id === current
	}));
}

/** Enough of the stored hash to name a session; a page never holds the whole of it. */
export function sessionHandle(id: string): string {
	return id.slice(0, 16);
}
