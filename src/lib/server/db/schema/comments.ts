import { index, integer, primaryKey, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { COMMENT_SUBJECTS } from '../../../ledger/comments';
import { groups } from './groups';
import { users } from './users';

/** Talk on a claim, a task or an inequality, within one group. */
export const comments = sqliteTable(
	'comments',
	{
		id: text('id').primaryKey(),
		groupId: text('group_id')
			.notNull()
			.references(() => groups.id, { onDelete: 'cascade' }),
		subject: text('subject', { enum: COMMENT_SUBJECTS }).notNull(),
		/** Id of the claim, task or inequality. */
		subjectId: text('subject_id').notNull(),
		authorId: text('author_id')
			.notNull()
			.references(() => users.id),
		/** Markdown, as typed; empty once removed. */
		body: text('body').notNull(),
		createdAt: integer('created_at', { mode: 'timestamp_ms' }).notNull(),
		/** Set by an edit after the first minutes. */
		editedAt: integer('edited_at', { mode: 'timestamp_ms' }),
		removedBy: text('removed_by').references(() => users.id),
		removedAt: integer('removed_at', { mode: 'timestamp_ms' })
	},
	(table) => [index('comments_subject').on(table.groupId, table.subject, table.subjectId)]
);

/** Earlier texts of comments edited after the first minutes. */
export const commentVersions = sqliteTable(
	'comment_versions',
	{
		id: text('id').primaryKey(),
		commentId: text('comment_id')
			.notNull()
			.references(() => comments.id, { onDelete: 'cascade' }),
		body: text('body').notNull(),
		/** When this text was replaced. */
		until: integer('until', { mode: 'timestamp_ms' }).notNull()
	},
	(table) => [index('comment_versions_comment').on(table.commentId)]
);

/** Who a comment mentions, as it was resolved when written. */
export const commentMentions = sqliteTable(
	'comment_mentions',
	{
		commentId: text('comment_id')
			.notNull()
			.references(() => comments.id, { onDelete: 'cascade' }),
		userId: text('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		/** What stands behind the `@` in the text. */
		handle: text('handle').notNull()
	},
	(table) => [primaryKey({ columns: [table.commentId, table.userId] })]
);
