CREATE TABLE `former_slugs` (
	`slug` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `evidence_files` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`submission_id` text NOT NULL,
	`name` text NOT NULL,
	`media_type` text NOT NULL,
	`bytes` integer NOT NULL,
	`sha256` text NOT NULL,
	`uploaded_by` text NOT NULL,
	`uploaded_at` integer NOT NULL,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`submission_id`) REFERENCES `submissions`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`uploaded_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `evidence_files_submission` ON `evidence_files` (`submission_id`);--> statement-breakpoint
CREATE INDEX `evidence_files_group` ON `evidence_files` (`group_id`);--> statement-breakpoint
CREATE TABLE `submissions` (
	`id` text PRIMARY KEY NOT NULL,
	`task_id` text NOT NULL,
	`claim_id` text NOT NULL,
	`quantity_key` text NOT NULL,
	`kind` text NOT NULL,
	`state` text DEFAULT 'waiting' NOT NULL,
	`relation` text DEFAULT '=' NOT NULL,
	`printed` text DEFAULT '' NOT NULL,
	`program` text DEFAULT '' NOT NULL,
	`program_version` text DEFAULT '' NOT NULL,
	`method` text DEFAULT '' NOT NULL,
	`comment` text DEFAULT '' NOT NULL,
	`finding` text,
	`certificate` text,
	`submitted_by` text NOT NULL,
	`submitted_at` integer NOT NULL,
	`decided_by` text,
	`decided_at` integer,
	`decision` text DEFAULT '' NOT NULL,
	FOREIGN KEY (`task_id`) REFERENCES `tasks`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`submitted_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`decided_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `submissions_task` ON `submissions` (`task_id`);--> statement-breakpoint
CREATE INDEX `submissions_claim` ON `submissions` (`claim_id`,`state`);--> statement-breakpoint
CREATE TABLE `tasks` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`number` integer NOT NULL,
	`version` integer DEFAULT 1 NOT NULL,
	`claim_id` text NOT NULL,
	`kind` text NOT NULL,
	`state` text NOT NULL,
	`assignee_id` text,
	`due_on` text,
	`instructions` text DEFAULT '' NOT NULL,
	`reason` text DEFAULT '' NOT NULL,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	`closed_at` integer,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`assignee_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `tasks_number` ON `tasks` (`group_id`,`number`);--> statement-breakpoint
CREATE INDEX `tasks_claim` ON `tasks` (`claim_id`);--> statement-breakpoint
CREATE INDEX `tasks_assignee` ON `tasks` (`assignee_id`,`state`);--> statement-breakpoint
CREATE INDEX `tasks_due` ON `tasks` (`state`,`due_on`);--> statement-breakpoint
CREATE TABLE `author_messages` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`name` text NOT NULL,
	`email` text NOT NULL,
	`message` text NOT NULL,
	`sent_at` integer NOT NULL,
	`handled_by` text,
	`handled_at` integer,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`handled_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `author_messages_claim` ON `author_messages` (`claim_id`);--> statement-breakpoint
CREATE TABLE `claim_notices` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`kind` text NOT NULL,
	`reference_id` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`reference_id`) REFERENCES `references`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `claim_notices_claim` ON `claim_notices` (`claim_id`);--> statement-breakpoint
CREATE TABLE `transcription_checks` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`claim_version` integer NOT NULL,
	`value_matches` integer NOT NULL,
	`locator_matches` integer NOT NULL,
	`inequality_matches` integer NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`task_id` text,
	`checked_by` text NOT NULL,
	`checked_at` integer NOT NULL,
	`voided_at` integer,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`task_id`) REFERENCES `tasks`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`checked_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `transcription_checks_claim` ON `transcription_checks` (`claim_id`,`claim_version`);--> statement-breakpoint
CREATE TABLE `comment_mentions` (
	`comment_id` text NOT NULL,
	`user_id` text NOT NULL,
	`handle` text NOT NULL,
	PRIMARY KEY(`comment_id`, `user_id`),
	FOREIGN KEY (`comment_id`) REFERENCES `comments`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `comment_versions` (
	`id` text PRIMARY KEY NOT NULL,
	`comment_id` text NOT NULL,
	`body` text NOT NULL,
	`until` integer NOT NULL,
	FOREIGN KEY (`comment_id`) REFERENCES `comments`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `comment_versions_comment` ON `comment_versions` (`comment_id`);--> statement-breakpoint
CREATE TABLE `comments` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`subject` text NOT NULL,
	`subject_id` text NOT NULL,
	`author_id` text NOT NULL,
	`body` text NOT NULL,
	`created_at` integer NOT NULL,
	`edited_at` integer,
	`removed_by` text,
	`removed_at` integer,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`removed_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `comments_subject` ON `comments` (`group_id`,`subject`,`subject_id`);--> statement-breakpoint
CREATE TABLE `calendar_feeds` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`user_id` text NOT NULL,
	`group_id` text,
	`created_at` integer NOT NULL,
	`revoked_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `calendar_feeds_token_hash_unique` ON `calendar_feeds` (`token_hash`);--> statement-breakpoint
CREATE INDEX `calendar_feeds_user` ON `calendar_feeds` (`user_id`);--> statement-breakpoint
CREATE TABLE `notification_choices` (
	`user_id` text NOT NULL,
	`kind` text NOT NULL,
	`delivery` text NOT NULL,
	PRIMARY KEY(`user_id`, `kind`),
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `notifications` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`group_id` text NOT NULL,
	`kind` text NOT NULL,
	`dedupe_key` text NOT NULL,
	`actor_id` text,
	`claim_id` text,
	`task_id` text,
	`comment_id` text,
	`message_id` text,
	`text` text DEFAULT '' NOT NULL,
	`created_at` integer NOT NULL,
	`read_at` integer,
	`for_digest` integer DEFAULT false NOT NULL,
	`digest_id` text,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`actor_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`task_id`) REFERENCES `tasks`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`comment_id`) REFERENCES `comments`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`message_id`) REFERENCES `author_messages`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `notifications_dedupe_key_unique` ON `notifications` (`dedupe_key`);--> statement-breakpoint
CREATE INDEX `notifications_user` ON `notifications` (`user_id`,`created_at`);--> statement-breakpoint
CREATE INDEX `notifications_digest` ON `notifications` (`for_digest`,`user_id`);--> statement-breakpoint
CREATE INDEX `notifications_claim` ON `notifications` (`claim_id`,`kind`);--> statement-breakpoint
-- What was mailed before notifications were rows: the same row, read already.
INSERT INTO `notifications`("id", "user_id", "group_id", "kind", "dedupe_key", "claim_id", "text", "created_at", "read_at", "for_digest") SELECT o."id", o."user_id", c."group_id", 'discrepancy', o."dedupe_key", o."claim_id", '', o."created_at", o."created_at", 0 FROM `outbox` o JOIN `claims` c ON c."id" = o."claim_id";--> statement-breakpoint
PRAGMA foreign_keys=OFF;--> statement-breakpoint
CREATE TABLE `__new_outbox` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`dedupe_key` text NOT NULL,
	`message_id` text NOT NULL,
	`user_id` text,
	`notification_id` text,
	`claim_id` text,
	`invitation_id` text,
	`state` text DEFAULT 'waiting' NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`not_before` integer NOT NULL,
	`last_error` text,
	`created_at` integer NOT NULL,
	`sent_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`notification_id`) REFERENCES `notifications`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`invitation_id`) REFERENCES `invitations`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
INSERT INTO `__new_outbox`("id", "kind", "dedupe_key", "message_id", "user_id", "notification_id", "claim_id", "invitation_id", "state", "attempts", "not_before", "last_error", "created_at", "sent_at") SELECT "id", "kind", "dedupe_key", "message_id", "user_id", "id", "claim_id", NULL, "state", "attempts", "not_before", "last_error", "created_at", "sent_at" FROM `outbox`;--> statement-breakpoint
DROP TABLE `outbox`;--> statement-breakpoint
ALTER TABLE `__new_outbox` RENAME TO `outbox`;--> statement-breakpoint
PRAGMA foreign_keys=ON;--> statement-breakpoint
CREATE UNIQUE INDEX `outbox_dedupe_key_unique` ON `outbox` (`dedupe_key`);--> statement-breakpoint
CREATE INDEX `outbox_waiting` ON `outbox` (`state`,`not_before`);--> statement-breakpoint
CREATE INDEX `outbox_notification` ON `outbox` (`notification_id`);--> statement-breakpoint
ALTER TABLE `groups` ADD `next_task_number` integer DEFAULT 1 NOT NULL;--> statement-breakpoint
ALTER TABLE `groups` ADD `budget_seconds` integer;--> statement-breakpoint
ALTER TABLE `invitations` ADD `email` text;--> statement-breakpoint
ALTER TABLE `claims` ADD `confirmed_by` text REFERENCES users(id);--> statement-breakpoint
ALTER TABLE `claims` ADD `confirmed_version` integer;--> statement-breakpoint
ALTER TABLE `audit` ADD `claim_id` text;--> statement-breakpoint
CREATE INDEX `audit_claim` ON `audit` (`claim_id`,`at`);--> statement-breakpoint
UPDATE `audit` SET `claim_id` = `entity_id` WHERE `entity` = 'claim';--> statement-breakpoint
-- The record is append-only; only a removed person's or group's id may go.
CREATE TRIGGER `audit_no_update` BEFORE UPDATE OF `id`, `action`, `entity`, `entity_id`, `claim_id`, `before`, `after`, `request_id`, `at` ON `audit` BEGIN SELECT RAISE(ABORT, 'the audit is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `audit_no_delete` BEFORE DELETE ON `audit` BEGIN SELECT RAISE(ABORT, 'the audit is append-only'); END;
