import { signUpInput } from '../../../schemas/account';
import type { z } from 'zod';
import { countSignUp } from '../../auth/attempts';
import { hashPassword } from '../../auth/password';
import type { Actor, Context } from '../../context';
import { users } from '../../db/schema';
import { isUniqueViolation } from '../../db/write';
import { ServiceError } from '../../errors';
import { newId } from '../../ids';
import { securityEvent } from '../../log';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

/**
 * Makes an account; `startSession` or `signIn` then opens it.
 * @param address the caller's, for the limit on tries; null in the seed
 * @throws ServiceError invalid, conflict (the address has an account), rate-limited
 */
export async function signUp(
	ctx: Context,
	input: z.input<typeof signUpInput>,
	address: string | null
): Promise<Actor> {
	const { name, email, password } = parseInput(signUpInput, input);
	if (address !== null) await countSignUp(address);
	const actor: Actor = { id: newId(), name, email, isAdmin: false };
	const passwordHash = await hashPassword(password);
	try {
		await ctx.db.write(async (tx) => {
			await tx.insert(users).values({ ...actor, passwordHash, createdAt: ctx.now() });
			await recordAudit(tx, ctx, {
				action: 'user.signed-up',
				entity: 'user',
				entityId: actor.id,
				after: { name }
			});
		});
	} catch (error) {
		if (!isUniqueViolation(error)) throw error;
		throw new ServiceError('conflict', 'This address has an account already.', [
			{ field: 'email', message: 'This address has an account already; sign in with it' }
		]);
	}
	securityEvent('sign-up', { user: actor.id, request: ctx.requestId });
	return actor;
}
