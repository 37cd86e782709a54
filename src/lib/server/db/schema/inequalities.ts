import { index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { ProblemTerm } from '../../../nonlocality/problem';

/** Shared by all groups; one row per equivalence class of functionals. */
export const inequalities = sqliteTable(
	'inequalities',
	{
		id: text('id').primaryKey(),
		digest: text('digest').notNull(),
		digestVersion: integer('digest_version').notNull(),
		/** True when the digest rests on rounded irrational coefficients. */
		numerical: integer('numerical', { mode: 'boolean' }).notNull(),
		/** Name of the family member it is, in plain text: `CHSH`, `CGLMP d=3`; null for others. */
		name: text('name'),
		nameLatex: text('name_latex'),
		/** The representative: a family's own form, else as first entered. Its values are stored. */
		outputs: text('outputs', { mode: 'json' }).$type<number[][]>().notNull(),
		terms: text('terms', { mode: 'json' }).$type<ProblemTerm[]>().notNull(),
		latex: text('latex').notNull(),
		/** representative = scale * canonical + shift; coefficients as text. */
		scale: text('scale').notNull(),
		shift: text('shift').notNull(),
		parties: integer('parties').notNull(),
		/** `2 in, 2 out`: in words, for tables and the scenario filter. */
		scenario: text('scenario').notNull(),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [uniqueIndex('inequalities_digest').on(table.digestVersion, table.digest)]
);

/**
 * What became of an inequality that a better digest found to be another one: its address leads
 * there. Its representative stays, since forms and earlier versions of claims name it by its id.
 */
export const inequalityRedirects = sqliteTable(
	'inequality_redirects',
	{
		/** The id it had. */
		id: text('id').primaryKey(),
		keptId: text('kept_id')
			.notNull()
			.references(() => inequalities.id),
		/** value of its representative = scale * value of the kept one's + shift. */
		scale: text('scale').notNull(),
		shift: text('shift').notNull(),
		name: text('name'),
		outputs: text('outputs', { mode: 'json' }).$type<number[][]>().notNull(),
		terms: text('terms', { mode: 'json' }).$type<ProblemTerm[]>().notNull(),
		latex: text('latex').notNull(),
		mergedAt: integer('merged_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [index('inequality_redirects_kept').on(table.keptId)]
);
