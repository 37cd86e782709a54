import { index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import { RELATIONS } from '../../../ledger/claim';
import type { Finding } from '../../../ledger/evidence';
import {
	SUBMISSION_KINDS,
	SUBMISSION_STATES,
	TASK_KINDS,
	TASK_STATES
} from '../../../ledger/tasks';
import { claims } from './claims';
import { groups } from './groups';
import { users } from './users';

/** Reproduction tasks: what people do where machines can't settle a claim. */
export const tasks = sqliteTable(
	'tasks',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		number: integer('number').notNull(),
		/** Rises by one with every change; a form of an older one is refused. */
		version: integer('version').notNull().default(1),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: TASK_KINDS }).notNull(),
		state: text('state', { enum: TASK_STATES }).notNull(),
		/** Null: open to all members. */
		assigneeId: text('assignee_id').references(() => users.id, { onDelete: 'set null' }),
		/** `YYYY-MM-DD`. */
		dueOn: text('due_on'),
		instructions: text('instructions').notNull().default(''),
		/** Why it was returned or cancelled last. */
		reason: text('reason').notNull().default(''),
		createdBy: text('created_by')
			.notNull()
			.references(() => users.id),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		updatedAt: integer('updated_at', { mode: 'timestamp_ms' }).notNull(),
		closedAt: integer('closed_at', { mode: 'timestamp_ms' })
	},
	(table) => [
		uniqueIndex('tasks_number').on(table.groupId, table.number),
		index('tasks_claim').on(table.claimId),
		index('tasks_assignee').on(table.assigneeId, table.state),
		index('tasks_due').on(table.state, table.dueOn)
	]
);

/** What somebody found; each try is kept. */
export const submissions = sqliteTable(
	'submissions',
	{
		id: text('id').primaryKey(),
		taskId: text('task_id')
			.notNull()
			.references(() => tasks.id, { onDelete: 'cascade' }),
		claimId: text('claim_id')
			.notNull()
			.references(() => claims.id, { onDelete: 'cascade' }),
		/**
		 * What the claim was about then (subject, quantity, parameters); a reproduction counts only
		 * while the claim still is about the same.
		 */
		quantityKey: text('quantity_key').notNull(),
		kind: text('kind', { enum: SUBMISSION_KINDS }).notNull(),
		state: text('state', { enum: SUBMISSION_STATES }).notNull().default('waiting'),
		/** The value found, as typed; empty unless `kind` is `value`. Read as a stated value. */
		relation: text('relation', { enum: RELATIONS }).notNull().default('='),
		printed: text('printed').notNull().default(''),
		program: text('program').notNull().default(''),
		programVersion: text('program_version').notNull().default(''),
		method: text('method').notNull().default(''),
		comment: text('comment').notNull().default(''),
		/** Of a certificate: what was checked, about the inequality's representative. */
		finding: text('finding', { mode: 'json' }).$type<Finding>(),
		/** The certificate as handed in, for download and another check. */
		certificate: text('certificate'),
		submittedBy: text('submitted_by')
			.notNull()
			.references(() => users.id),
		submittedAt: integer('submitted_at', { mode: 'timestamp_ms' }).notNull(),
		decidedBy: text('decided_by').references(() => users.id),
		decidedAt: integer('decided_at', { mode: 'timestamp_ms' }),
		/** Why it was returned, or what contradicts it. */
		decision: text('decision').notNull().default('')
	},
	(table) => [
		index('submissions_task').on(table.taskId),
		index('submissions_claim').on(table.claimId, table.state)
	]
);

/** Files handed in with a submission; the bytes are in the file storage under `id`. */
export const evidenceFiles = sqliteTable(
	'evidence_files',
	{
		/** Generated; also the name in the storage. */
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		submissionId: text('submission_id')
			.notNull()
			.references(() => submissions.id, { onDelete: 'cascade' }),
		/** As the person named it, without folders and control characters; for the download. */
		name: text('name').notNull(),
		mediaType: text('media_type').notNull(),
		bytes: integer('bytes').notNull(),
		sha256: text('sha256').notNull(),
		uploadedBy: text('uploaded_by')
			.notNull()
			.references(() => users.id),
		uploadedAt: integer('uploaded_at', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [
		index('evidence_files_submission').on(table.submissionId),
		index('evidence_files_group').on(table.groupId)
	]
);
