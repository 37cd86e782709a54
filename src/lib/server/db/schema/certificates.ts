import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { Finding } from '../../../ledger/evidence';
import { claims } from './claims';
import { users } from './users';

/** Strategies and certificates that members attach to a claim, each accepted by its check. */
export const attachedCertificates = sqliteTable(
	'attached_certificates',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		/** Where it is from: a paper with its equation, a program. */
		source: text('source').notNull().default(''),
		/** SHA-256 of the text: the same is attached once. */
		sha256: text('sha256').notNull(),
		bytes: integer('bytes').notNull(),
		/** What was checked, about the inequality's representative. */
		finding: text('finding', { mode: 'json' }).$type<Finding>().notNull(),
		attachedBy: text('attached_by')
			.notNull()
			.references(() => users.id),
		attachedAt: integer('attached_at', { mode: 'timestamp_ms' }).notNull(),
		/** As handed in, of up to megabytes: the last column, so that the others are read without it. */
		certificate: text('certificate').notNull()
	},
	(table) => [index('attached_certificates_claim').on(table.claimId)]
);
