import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { MAIL_KINDS } from '../../../ledger/notifications';
import { claims } from './claims';
import { invitations } from './groups';
import { notifications } from './notifications';
import { users } from './users';

export const OUTBOX_STATES = ['waiting', 'sent', 'dropped', 'dead'] as const;

/** Mail to send, written in the transaction of the change that causes it; rendered when sent. */
export const outbox = sqliteTable(
	'outbox',
	{
		id: text('id').primaryKey(),
		kind: text('kind', { enum: MAIL_KINDS }).notNull(),
		/** The same event is mailed to the same person once, however often it is derived. */
		dedupeKey: text('dedupe_key').notNull().unique(),
		messageId: text('message_id').notNull(),
		/** Null for an invitation: its address stands in the invitation. */
		userId: text('user_id').references(() => users.id, { onDelete: 'cascade' }),
		/** What it tells; null for an invitation or a digest. */
		notificationId: text('notification_id').references(() => notifications.id, {
			onDelete: 'cascade'
		}),
		claimId: text('claim_id').references(() => claims.id, { onDelete: 'cascade' }),
		invitationId: text('invitation_id').references(() => invitations.id, { onDelete: 'cascade' }),
		state: text('state', { enum: OUTBOX_STATES }).notNull().default('waiting'),
		attempts: integer('attempts').notNull().default(0),
		/** A discrepancy waits for its stations, up to sixty seconds; the rest go at once. */
		notBefore: integer('not_before', { mode: 'timestamp_ms' }).notNull(),
		lastError: text('last_error'),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		sentAt: integer('sent_at', { mode: 'timestamp_ms' })
	},
	(table) => [
		index('outbox_waiting').on(table.state, table.notBefore),
		index('outbox_notification').on(table.notificationId)
	]
);
