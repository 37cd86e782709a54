import { endSession } from '../../auth/sessions';
import type { Context } from '../../context';
import { securityEvent } from '../../log';

/** Ends the session on the server, so that a copy of its cookie is worth nothing. */
export async function signOut(ctx: Context, sessionId: string): Promise<void> {
	await endSession(ctx.db, sessionId);
	securityEvent('sign-out', { user: ctx.actor?.id ?? null, request: ctx.requestId });
}
