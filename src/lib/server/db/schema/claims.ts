import { index, integer, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import {
	CLAIM_STATES,
	READINGS,
	RELATIONS,
	VERDICT_STATUSES,
	VISIBILITIES
} from '../../../ledger/claim';
import type { Verdict } from '../../../ledger/verdict';
import type { ClaimInput } from '../../../schemas/claim-input';
import { groups } from './groups';
import { inequalities } from './inequalities';
import { recomputations } from './recomputations';
import { references } from './references';
import { users } from './users';

export const claims = sqliteTable(
	'claims',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		number: integer('number').notNull(),
		/** Rises by one with every edit; claim_versions keeps each. */
		version: integer('version').notNull().default(1),
		/** What was typed, so that editing starts from it. */
		input: text('input', { mode: 'json' }).$type<ClaimInput>().notNull(),
		inequalityId: text('inequality_id').references(() => inequalities.id),
		/** claimed value = scale * value of the inequality's representative + shift. */
		scale: text('scale').notNull().default('1'),
		shift: text('shift').notNull().default('0'),
		/** The subject in plain text and as LaTeX, as entered. */
		subject: text('subject').notNull(),
		subjectLatex: text('subject_latex'),
		quantity: text('quantity').notNull(),
		/** `Quantum maximum`, `NPA bound, level 2`: the quantity with its parameters. */
		quantityLabel: text('quantity_label').notNull(),
		relation: text('relation', { enum: RELATIONS }).notNull(),
		printed: text('printed').notNull(),
		reading: text('reading', { enum: READINGS }).notNull(),
		/** The printed value as a double, for sorting only. */
		sortValue: real('sort_value').notNull(),
		method: text('method').notNull().default(''),
		referenceId: text('reference_id')
			.notNull()
			.references(() => references.id),
		locator: text('locator').notNull(),
		note: text('note').notNull().default(''),
		state: text('state', { enum: CLAIM_STATES }).notNull().default('active'),
		supersededById: text('superseded_by_id'),
		visibility: text('visibility', { enum: VISIBILITIES }).notNull().default('group'),
		publishedBy: text('published_by').references(() => users.id),
		publishedAt: integer('published_at', { mode: 'timestamp_ms' }),
		/** Who last compared it with the paper and found value, locator and inequality right, and which version. */
		confirmedBy: text('confirmed_by').references(() => users.id),
		confirmedVersion: integer('confirmed_version'),
		/** Derived; never edited by hand. The whole of the latest verdict, and its parts for filters. */
		verdict: text('verdict', { mode: 'json' }).$type<Verdict>().notNull(),
		status: text('status', { enum: VERDICT_STATUSES }).notNull().default('open'),
		/** The recomputation of exactly the claimed quantity, when a solver serves it. */
		recomputationId: text('recomputation_id').references(() => recomputations.id),
		/** Of the expression with its inputs counted from the other number, where that matters. */
		otherBaseRecomputationId: text('other_base_recomputation_id').references(
			() => recomputations.id
		),
		createdBy: text('created_by')
			.notNull()
			.references(() => users.id),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		updatedAt: integer('updated_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [
		uniqueIndex('claims_number').on(table.groupId, table.number),
		index('claims_inequality').on(table.inequalityId),
		index('claims_reference').on(table.referenceId),
		index('claims_recomputation').on(table.recomputationId),
		index('claims_other_base').on(table.otherBaseRecomputationId),
		index('claims_public').on(table.visibility, table.status)
	]
);

export const claimVersions = sqliteTable(
	'claim_versions',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		version: integer('version').notNull(),
		input: text('input', { mode: 'json' }).$type<ClaimInput>().notNull(),
		changedBy: text('changed_by')
			.notNull()
			.references(() => users.id),
		changedAt: integer('changed_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [uniqueIndex('claim_versions_number').on(table.claimId, table.version)]
);

/** Every verdict a claim ever had, newest last. */
export const verdicts = sqliteTable(
	'verdicts',
	{
		id: text('id').primaryKey(),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		claimVersion: integer('claim_version').notNull(),
		status: text('status', { enum: VERDICT_STATUSES }).notNull(),
		verdict: text('verdict', { mode: 'json' }).$type<Verdict>().notNull(),
		at: integer('at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [index('verdicts_claim').on(table.claimId)]
);
