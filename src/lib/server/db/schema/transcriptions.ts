import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { NOTICE_KINDS } from '../../../ledger/notices';
import { claims } from './claims';
import { references } from './references';
import { tasks } from './tasks';
import { users } from './users';

/** A claim compared with its paper by a second person. */
export const transcriptionChecks = sqliteTable(
	'transcription_checks',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		/** The version that was compared; a later edit calls for another comparison. */
		claimVersion: integer('claim_version').notNull(),
		valueMatches: integer('value_matches', { mode: 'boolean' }).notNull(),
		locatorMatches: integer('locator_matches', { mode: 'boolean' }).notNull(),
		inequalityMatches: integer('inequality_matches', { mode: 'boolean' }).notNull(),
		/** What is wrong, where something is. */
		note: text('note').notNull().default(''),
		/** The task it was done for; null: done from the claim's page. */
		taskId: text('task_id').references(() => tasks.id, { onDelete: 'set null' }),
		checkedBy: text('checked_by')
			.notNull()
			.references(() => users.id),
		checkedAt: integer('checked_at', { mode: 'timestamp_ms' }).notNull(),
		/** Set when its task was returned: it counts no more. */
		voidedAt: integer('voided_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('transcription_checks_claim').on(table.claimId, table.claimVersion)]
);

/** An erratum or a newer version of a claim's paper, attached to the claim and shown with it. */
export const claimNotices = sqliteTable(
	'claim_notices',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: NOTICE_KINDS }).notNull(),
		/** A paper of the group. */
		referenceId: text('reference_id')
			.notNull()
			.references(() => references.id),
		/** One line on what it changes. */
		note: text('note').notNull().default(''),
		createdBy: text('created_by')
			.notNull()
			.references(() => users.id),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [index('claim_notices_claim').on(table.claimId)]
);

/** What an author writes about a published claim; only the group's maintainers read it. */
export const authorMessages = sqliteTable(
	'author_messages',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		/** As typed; nobody has verified it. */
		name: text('name').notNull(),
		email: text('email').notNull(),
		message: text('message').notNull(),
		sentAt: integer('sent_at', { mode: 'timestamp_ms' }).notNull(),
		/** When a maintainer marked it as dealt with. */
		handledBy: text('handled_by').references(() => users.id),
		handledAt: integer('handled_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('author_messages_claim').on(table.claimId)]
);
