import { eq } from 'drizzle-orm';
import { changePasswordInput, type ChangePasswordInput } from '../../../schemas/account';
import { passwordProblem } from '../../../schemas/password-rules';
import { countSignIn, forgetFailures } from '../../auth/attempts';
import { hashPassword, verifyPassword } from '../../auth/password';
import { endOtherSessions } from '../../auth/sessions';
import type { UserContext } from '../../context';
import { users } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { parseInput } from '../parse-input';

/**
 * Changes one's own password and ends all other sessions.
 * @throws ServiceError invalid (the current password is wrong, or the new one is refused), rate-limited
 */
export async function changePassword(
	ctx: UserContext,
	input: ChangePasswordInput,
	current: { readonly sessionId: string; readonly address: string | null }
): Promise<void> {
	const passwords = parseInput(changePasswordInput, input);
	const { actor } = ctx;
	const problem = passwordProblem(passwords.password, actor);
	if (problem) throw invalid('password', problem);
	await countSignIn(current.address, actor.email);
	const [user] = await ctx.db.read.select().from(users).where(eq(users.id, actor.id));
	if (!(await verifyPassword(user?.passwordHash ?? null, passwords.current))) {
		throw invalid('current', 'This is not your current password');
	}
	forgetFailures(actor.email);
	const passwordHash = await hashPassword(passwords.password);
	await ctx.db.write(async (tx) => {
		await tx.update(users).set({ passwordHash }).where(eq(users.id, actor.id));
		await recordAudit(tx, ctx, {
			action: 'user.password-changed',
			entity: 'user',
			entityId: actor.id
		});
	});
	await endOtherSessions(ctx.db, actor.id, current.sessionId);
}

const invalid = (field: string, message: string) =>
	new ServiceError('invalid', message, [{ field, message }]);
