import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { groups } from './groups';
import { users } from './users';

/** Append-only; written in the transaction of the change it records. */
export const audit = sqliteTable(
	'audit',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id').references(() => groups.id, { onDelete: 'set null' }),
		/** Null for the product itself (a derived verdict). */
		actorId: text('actor_id').references(() => users.id, { onDelete: 'set null' }),
		/** `claim.entered`, `claim.edited`, `group.created` ... */
		action: text('action').notNull(),
		entity: text('entity').notNull(),
		entityId: text('entity_id').notNull(),
		/** The claim it concerns, also where the entity is a task or comment on it. */
		claimId: text('claim_id'),
		before: text('before', { mode: 'json' }).$type<unknown>(),
		after: text('after', { mode: 'json' }).$type<unknown>(),
		requestId: text('request_id').notNull(),
		at: integer('at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [
		index('audit_group').on(table.groupId, table.at),
		index('audit_claim').on(table.claimId, table.at),
		index('audit_entity').on(table.entity, table.entityId)
	]
);
