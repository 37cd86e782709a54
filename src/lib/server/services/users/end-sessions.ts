import { endOtherSessions, endSession, sessionsOf } from '../../auth/sessions';
import type { UserContext } from '../../context';
import { ServiceError } from '../../errors';
import { sessionHandle } from './list-sessions';

/**
 * Ends one of one's own sessions.
 * @throws ServiceError not-found
 */
export async function endOwnSession(ctx: UserContext, handle: string): Promise<void> {
	const own = await sessionsOf(ctx.db, ctx.actor.id);
	const session = own.find(({ id }) => sessionHandle(id) === handle);
	if (!session) throw new ServiceError('not-found', 'This session has ended already.');
	await endSession(ctx.db, session.id);
}

/** Ends all of one's sessions but the one this request belongs to. */
export async function endSessionsElsewhere(ctx: UserContext, current: string): Promise<void> {
	await endOtherSessions(ctx.db, ctx.actor.id, current);
}
