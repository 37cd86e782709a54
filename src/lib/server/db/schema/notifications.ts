import { index, integer, primaryKey, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { DELIVERIES, NOTIFICATION_KINDS } from '../../../ledger/notifications';
import { claims } from './claims';
import { comments } from './comments';
import { groups } from './groups';
import { tasks } from './tasks';
import { authorMessages } from './transcriptions';
import { users } from './users';

/** What is new for a person: the in-app list, and what mails and digests are made of. */
export const notifications = sqliteTable(
	'notifications',
	{
		id: text('id').primaryKey(),
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: NOTIFICATION_KINDS }).notNull(),
		/** The same event is told to the same person once. */
		dedupeKey: text('dedupe_key').notNull().unique(),
		/** Who caused it; null: the product itself, or somebody without an account. */
		actorId: text('actor_id').references(() => users.id, { onDelete: 'set null' }),
		claimId: text('claim_id').references(() => claims.id, { onDelete: 'cascade' }),
		taskId: text('task_id').references(() => tasks.id, { onDelete: 'cascade' }),
		commentId: text('comment_id').references(() => comments.id, { onDelete: 'cascade' }),
		messageId: text('message_id').references(() => authorMessages.id, { onDelete: 'cascade' }),
		/** What it says beyond the rows it points at: a reason, a date. */
		text: text('text').notNull().default(''),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		readAt: integer('read_at', { mode: 'timestamp_ms' }),
		/** Waits for the next digest; cleared when one takes it. */
		forDigest: integer('for_digest', { mode: 'boolean' }).notNull().default(false),
		/** The digest's outbox row. */
		digestId: text('digest_id')
	},
	(table) => [
		index('notifications_user').on(table.userId, table.createdAt),
		index('notifications_digest').on(table.forDigest, table.userId),
		index('notifications_claim').on(table.claimId, table.kind)
	]
);

/** A person's choices; kinds without a row are delivered as DEFAULT_DELIVERY says. */
export const notificationChoices = sqliteTable(
	'notification_choices',
	{
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: NOTIFICATION_KINDS }).notNull(),
		delivery: text('delivery', { enum: DELIVERIES }).notNull()
	},
	(table) => [primaryKey({ columns: [table.userId, table.kind] })]
);

/** Secret addresses of calendars of due dates; the address is derived from the id and checked by its hash. */
export const calendarFeeds = sqliteTable(
	'calendar_feeds',
	{
		id: text('id').primaryKey(),
		tokenHash: text('token_hash').notNull().unique(),
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		/** Null: the person's own tasks; else all tasks of that group. */
		groupId: text('group_id').references(() => groups.id, { onDelete: 'cascade' }),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		revokedAt: integer('revoked_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('calendar_feeds_user').on(table.userId)]
);
