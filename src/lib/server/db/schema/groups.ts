import { index, integer, primaryKey, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { ROLES } from '../../../ledger/roles';
import { users } from './users';

export const groups = sqliteTable('groups', {
	id: text('id').primaryKey(),
	slug: text('slug').notNull().unique(),
	name: text('name').notNull(),
	description: text('description').notNull().default(''),
	/** The number the group's next claim gets. */
	nextClaimNumber: integer('next_claim_number').notNull().default(1),
	nextTaskNumber: integer('next_task_number').notNull().default(1),
	/** Seconds a recomputation of the group may take; null: the operator's setting. */
	budgetSeconds: integer('budget_seconds'),
	createdBy: text('created_by')
		.notNull()
		.references(() => users.id),
	createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull()
});

/** Addresses a group had before; they lead to where it is now. */
export const formerSlugs = sqliteTable('former_slugs', {
	slug: text('slug').primaryKey(),
	groupId: text('group_id')
		.notNull()
		.references(() => groups.id, { onDelete: 'cascade' })
});

export const memberships = sqliteTable(
	'memberships',
	{
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		role: text('role', { enum: ROLES }).notNull(),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [
		primaryKey({ columns: [table.groupId, table.userId] }),
		index('memberships_user').on(table.userId)
	]
);

/** One-time joining links, given on or mailed; only the token's hash is kept. */
export const invitations = sqliteTable(
	'invitations',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		tokenHash: text('token_hash').notNull().unique(),
		role: text('role', { enum: ROLES }).notNull(),
		/** Where it was mailed to, in lower case; null for a link somebody passes on. */
		email: text('email'),
		createdBy: text('created_by')
			.notNull()
			.references(() => users.id),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		expiresAt: integer('expires_at', { mode: 'timestamp_ms' }).notNull(),
		usedBy: text('used_by').references(() => users.id),
		usedAt: integer('used_at', { mode: 'timestamp_ms' }),
		revokedAt: integer('revoked_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('invitations_group').on(table.groupId)]
);
