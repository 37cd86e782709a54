import { index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import { groups } from './groups';
import { users } from './users';

/** Papers of a group; the formatted strings are made once, when the entry is written. */
export const references = sqliteTable(
	'references',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		/** Exactly as pasted. */
		bibtex: text('bibtex').notNull(),
		csl: text('csl', { mode: 'json' }).$type<Record<string, unknown>>().notNull(),
		title: text('title').notNull(),
		/** `Arden & Voss 2004`, `Ferro et al. 2002`. */
		short: text('short').notNull(),
		/** `S. Lindqvist, J. Invented Phys. 12, 345 (2011)`, without the title. */
		source: text('source').notNull(),
		/** One line with everything, plain text. */
		formatted: text('formatted').notNull(),
		year: integer('year'),
		/** Lower case, without a resolver's address. */
		doi: text('doi'),
		arxiv: text('arxiv'),
		createdBy: text('created_by')
			.notNull()
			.references(() => users.id),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [
		uniqueIndex('references_doi').on(table.groupId, table.doi),
		index('references_group').on(table.groupId)
	]
);
