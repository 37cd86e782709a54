import { index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { DoneResult, Problem, Progress } from '../../../nonlocality/problem';
import type { ResultSummary } from '../../../ledger/evidence';
import { groups } from './groups';
import { inequalities } from './inequalities';

export const RECOMPUTATION_STATES = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;

/** The stations every functional gets, in the order they are run. */
export const STATIONS = [
	'local',
	'no-signalling',
	'npa-1',
	'npa-1-non-negative',
	'almost-quantum',
	'npa-2',
	'see-saw-2',
	'quantum'
] as const;
export type Station = (typeof STATIONS)[number];

/**
 * The job queue and its results in one table: a problem is solved once and shared by every claim
 * that asks for it. Values are those of the inequality's representative.
 */
export const recomputations = sqliteTable(
	'recomputations',
	{
		id: text('id').primaryKey(),
		/** SHA-256 of the normalised problem: the same problem is one row. */
		problemHash: text('problem_hash').notNull().unique(),
		problem: text('problem', { mode: 'json' }).$type<Problem>().notNull(),
		inequalityId: text('inequality_id').references(() => inequalities.id),
		station: text('station', { enum: STATIONS }),
		/** Whose turn it counts against; null for the seed. */
		groupId: text('group_id').references(() => groups.id, { onDelete: 'set null' }),
		state: text('state', { enum: RECOMPUTATION_STATES }).notNull().default('queued'),
		attempts: integer('attempts').notNull().default(0),
		leaseToken: text('lease_token'),
		leaseUntil: integer('lease_until', { mode: 'timestamp_ms' }),
		notBefore: integer('not_before', { mode: 'timestamp_ms' }),
		progress: text('progress', { mode: 'json' }).$type<Progress>(),
		/** What lists and verdicts need of the result; the whole of it is a table of its own. */
		summary: text('summary', { mode: 'json' }).$type<ResultSummary>(),
		lower: real('lower'),
		upper: real('upper'),
		exact: text('exact'),
		/** Whether the independent check accepted the certificate; null when there is none yet. */
		checked: integer('checked', { mode: 'boolean' }),
		checkNote: text('check_note'),
		/** The solver it was queued for last; null before that was kept. */
		solver: text('solver'),
		/** Queued again for a newer solver, behind everything that somebody waits for. */
		renewal: integer('renewal', { mode: 'boolean' }).notNull().default(false),
		/** Why it failed or stopped, for a person. */
		reason: text('reason'),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		startedAt: integer('started_at', { mode: 'timestamp_ms' }),
		finishedAt: integer('finished_at', { mode: 'timestamp_ms' })
	},
	(table) => [
		index('recomputations_state').on(table.state, table.notBefore),
		index('recomputations_inequality').on(table.inequalityId)
	]
);

/**
 * The results whole, with certificates of up to megabytes: apart, so that reading the queue or a
 * list never walks through them.
 */
export const results = sqliteTable('results', {
	recomputationId: text('recomputation_id')
		.primaryKey()
		.references(() => recomputations.id, { onDelete: 'cascade' }),
	result: text('result', { mode: 'json' }).$type<DoneResult>().notNull()
});

/**
 * What a run had proved before a later solver ran it again. It stays proved: verdicts and bounds take
 * the best of all, so that a newer solver never makes one worse.
 */
export const earlierResults = sqliteTable(
	'earlier_results',
	{
		id: text('id').primaryKey(),
		recomputationId: text('recomputation_id')
			.notNull()
			.references(() => recomputations.id, { onDelete: 'cascade' }),
		solver: text('solver').notNull(),
		summary: text('summary', { mode: 'json' }).$type<ResultSummary>().notNull(),
		lower: real('lower'),
		upper: real('upper'),
		exact: text('exact'),
		checkNote: text('check_note'),
		finishedAt: integer('finished_at', { mode: 'timestamp_ms' }).notNull(),
		/** The last column, so that the others are read without it. */
		result: text('result', { mode: 'json' }).$type<DoneResult>().notNull()
	},
	(table) => [index('earlier_results_run').on(table.recomputationId)]
);
