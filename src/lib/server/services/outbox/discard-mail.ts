import { and, eq, inArray } from 'drizzle-orm';
import type { UserContext } from '../../context';
import { outbox } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { administer } from './administer';

/**
 * Lets a mail that is dead or waits never be sent; its row stays.
 * @throws ServiceError not-found, when it is neither
 */
export async function discardMail(ctx: UserContext, id: string): Promise<void> {
	administer(ctx);
	await ctx.db.write(async (tx) => {
		const wanted = and(eq(outbox.id, id), inArray(outbox.state, ['dead', 'waiting']));
		const [before] = await tx
			.select({ state: outbox.state, attempts: outbox.attempts })
			.from(outbox)
			.where(wanted);
		if (!before) throw new ServiceError('not-found', 'This mail was sent or discarded meanwhile.');
		await tx.update(outbox).set({ state: 'dropped' }).where(wanted);
		await recordAudit(tx, ctx, {
			action: 'mail.discarded',
			entity: 'mail',
			entityId: id,
			before,
			after: { state: 'dropped' }
		});
	});
}
