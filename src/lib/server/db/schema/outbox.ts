import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { claims } from './claims';
import { users } from './users';

export const OUTBOX_STATES = ['waiting', 'sent', 'dropped', 'dead'] as const;

/** Mail to send, written in the transaction of the change that causes it; rendered when sent. */
export const outbox = sqliteTable(
	'outbox',
	{
		id: text('id').primaryKey(),
		kind: text('kind', { enum: ['discrepancy'] }).notNull(),
		/** One mail per person and change of verdict, however often it is derived. */
		dedupeKey: text('dedupe_key').notNull().unique(),
		messageId: text('message_id').notNull(),
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		state: text('state', { enum: OUTBOX_STATES }).notNull().default('waiting'),
		attempts: integer('attempts').notNull().default(0),
		/** Sixty seconds after the verdict, or at once when the stations are done. */
		notBefore: integer('not_before', { mode: 'timestamp_ms' }).notNull(),
		lastError: text('last_error'),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		sentAt: integer('sent_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('outbox_waiting').on(table.state, table.notBefore)]
);
