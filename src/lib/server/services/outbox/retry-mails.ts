import { and, eq, inArray } from 'drizzle-orm';
import type { UserContext } from '../../context';
import { outbox } from '../../db/schema';
import { ServiceError } from '../../errors';
import { recordAudit } from '../audit';
import { administer } from './administer';

/**
 * Lets mails be sent at once, with ten tries before them again: one that is dead or waits, or all
 * that are dead.
 * @throws ServiceError not-found, when that mail is neither
 */
export async function retryMails(ctx: UserContext, id: string | 'all-dead'): Promise<number> {
	administer(ctx);
	return ctx.db.write(async (tx) => {
		const wanted =
			id === 'all-dead'
				? eq(outbox.state, 'dead')
				: and(eq(outbox.id, id), inArray(outbox.state, ['dead', 'waiting']));
		const rows = await tx
			.select({ id: outbox.id, state: outbox.state, attempts: outbox.attempts })
			.from(outbox)
			.where(wanted);
		if (id !== 'all-dead' && rows.length === 0) {
			throw new ServiceError('not-found', 'This mail was sent or discarded meanwhile.');
		}
		const after = { state: 'waiting' as const, attempts: 0, notBefore: ctx.now() };
		await tx.update(outbox).set(after).where(wanted);
		for (const { id: entityId, ...before } of rows) {
			await recordAudit(tx, ctx, {
				action: 'mail.retried',
				entity: 'mail',
				entityId,
				before,
				after: { state: after.state, attempts: after.attempts }
			});
		}
		return rows.length;
	});
}
