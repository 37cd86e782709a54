import { count, desc, eq, sql } from 'drizzle-orm';
import type { OutboxPage } from '../../../schemas/talk-views';
import { pageWithin } from '../../../schemas/page-within';
import type { UserContext } from '../../context';
import { OUTBOX_STATES, invitations, outbox, users } from '../../db/schema';
import { administer } from './administer';

const PAGE_SIZE = 50;

/** Mails in a state, newest first, for the site's administrator. @throws ServiceError not-found */
export async function listOutbox(
	ctx: UserContext,
	query: { readonly state: string; readonly page: number }
): Promise<OutboxPage> {
	administer(ctx);
	const state = OUTBOX_STATES.find((known) => known === query.state) ?? 'dead';
	const { read } = ctx.db;
	const counted = await read
		.select({ state: outbox.state, total: count() })
		.from(outbox)
		.groupBy(outbox.state);
	const totalOf = (each: string) => counted.find((row) => row.state === each)?.total ?? 0;
	const page = pageWithin(query.page, totalOf(state), PAGE_SIZE);
	const rows = await read
		.select({
			id: outbox.id,
			kind: outbox.kind,
			to: sql<string>`coalesce(${users.email}, ${invitations.email}, '')`,
			state: outbox.state,
			attempts: outbox.attempts,
			lastError: outbox.lastError,
			createdAt: outbox.createdAt,
			notBefore: outbox.notBefore
		})
		.from(outbox)
		.leftJoin(users, eq(users.id, outbox.userId))
		.leftJoin(invitations, eq(invitations.id, outbox.invitationId))
		.where(eq(outbox.state, state))
		.orderBy(desc(outbox.createdAt), desc(outbox.id))
		.limit(PAGE_SIZE)
		.offset((page - 1) * PAGE_SIZE);
	return {
		rows: rows.map((row) => ({
			...row,
			createdAt: row.createdAt.toISOString(),
			notBefore: row.notBefore.toISOString()
		})),
		state,
		counts: {
			waiting: totalOf('waiting'),
			sent: totalOf('sent'),
			dropped: totalOf('dropped'),
			dead: totalOf('dead')
		},
		page,
		pageSize: PAGE_SIZE
	};
}
