import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import { signInInput } from '../../../schemas/account';
import { countSignIn, forgetFailures } from '../../auth/attempts';
import { hashPassword, needsRehash, verifyPassword } from '../../auth/password';
import { startSession } from '../../auth/sessions';
import type { Actor, Context } from '../../context';
import { users } from '../../db/schema';
import { ServiceError } from '../../errors';
import { pseudonym, securityEvent } from '../../log';
import { parseInput } from '../parse-input';

export interface SignedIn {
	readonly actor: Actor;
	readonly sessionId: string;
	/** For `setSessionCookie`. */
	readonly token: string;
}

/**
 * Checks a password and starts a session. An unknown address takes the same time and gets the
 * same answer as a wrong password.
 * @param address the caller's, for the limit on tries
 * @throws ServiceError invalid, unauthenticated, rate-limited
 */
export async function signIn(
	ctx: Context,
	input: z.input<typeof signInInput>,
	address: string | null
): Promise<SignedIn> {
	const { email, password } = parseInput(signInInput, input);
	await countSignIn(address, email);
	const [user] = await ctx.db.read.select().from(users).where(eq(users.email, email));
	if (!(await verifyPassword(user?.passwordHash ?? null, password)) || !user) {
		securityEvent('sign-in-failed', { account: pseudonym(email), request: ctx.requestId });
		throw new ServiceError('unauthenticated', 'Address and password do not match an account.');
	}
	forgetFailures(email);
	if (needsRehash(user.passwordHash)) {
		const passwordHash = await hashPassword(password);
		await ctx.db.write((tx) => tx.update(users).set({ passwordHash }).where(eq(users.id, user.id)));
	}
	const { token, sessionId } = await startSession(ctx.db, user.id);
	securityEvent('sign-in', { user: user.id, request: ctx.requestId });
	const { id, name, isAdmin } = user;
	return { actor: { id, name, email, isAdmin }, sessionId, token };
}
