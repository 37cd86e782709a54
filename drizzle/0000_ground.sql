CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`expires_at` integer NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text NOT NULL,
	`is_admin` integer DEFAULT false NOT NULL,
	`created_at` integer NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email_unique` ON `users` (`email`);--> statement-breakpoint
CREATE TABLE `groups` (
	`id` text PRIMARY KEY NOT NULL,
	`slug` text NOT NULL,
	`name` text NOT NULL,
	`description` text DEFAULT '' NOT NULL,
	`next_claim_number` integer DEFAULT 1 NOT NULL,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `groups_slug_unique` ON `groups` (`slug`);--> statement-breakpoint
CREATE TABLE `invitations` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`token_hash` text NOT NULL,
	`role` text NOT NULL,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	`used_by` text,
	`used_at` integer,
	`revoked_at` integer,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`used_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `invitations_token_hash_unique` ON `invitations` (`token_hash`);--> statement-breakpoint
CREATE INDEX `invitations_group` ON `invitations` (`group_id`);--> statement-breakpoint
CREATE TABLE `memberships` (
	`group_id` text NOT NULL,
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	`created_at` integer NOT NULL,
	PRIMARY KEY(`group_id`, `user_id`),
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `memberships_user` ON `memberships` (`user_id`);--> statement-breakpoint
CREATE TABLE `inequalities` (
	`id` text PRIMARY KEY NOT NULL,
	`digest` text NOT NULL,
	`digest_version` integer NOT NULL,
	`numerical` integer NOT NULL,
	`name` text,
	`name_latex` text,
	`outputs` text NOT NULL,
	`terms` text NOT NULL,
	`latex` text NOT NULL,
	`scale` text NOT NULL,
	`shift` text NOT NULL,
	`parties` integer NOT NULL,
	`scenario` text NOT NULL,
	`created_at` integer NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `inequalities_digest` ON `inequalities` (`digest_version`,`digest`);--> statement-breakpoint
CREATE TABLE `references` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`bibtex` text NOT NULL,
	`csl` text NOT NULL,
	`title` text NOT NULL,
	`short` text NOT NULL,
	`source` text NOT NULL,
	`formatted` text NOT NULL,
	`year` integer,
	`doi` text,
	`arxiv` text,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `references_doi` ON `references` (`group_id`,`doi`);--> statement-breakpoint
CREATE INDEX `references_group` ON `references` (`group_id`);--> statement-breakpoint
CREATE TABLE `recomputations` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_hash` text NOT NULL,
	`problem` text NOT NULL,
	`inequality_id` text,
	`station` text,
	`group_id` text,
	`state` text DEFAULT 'queued' NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`lease_token` text,
	`lease_until` integer,
	`not_before` integer,
	`progress` text,
	`result` text,
	`lower` real,
	`upper` real,
	`exact` text,
	`checked` integer,
	`check_note` text,
	`reason` text,
	`created_at` integer NOT NULL,
	`started_at` integer,
	`finished_at` integer,
	FOREIGN KEY (`inequality_id`) REFERENCES `inequalities`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE UNIQUE INDEX `recomputations_problem_hash_unique` ON `recomputations` (`problem_hash`);--> statement-breakpoint
CREATE INDEX `recomputations_state` ON `recomputations` (`state`,`not_before`);--> statement-breakpoint
CREATE INDEX `recomputations_inequality` ON `recomputations` (`inequality_id`);--> statement-breakpoint
CREATE TABLE `claim_versions` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`version` integer NOT NULL,
	`input` text NOT NULL,
	`changed_by` text NOT NULL,
	`changed_at` integer NOT NULL,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`changed_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `claim_versions_number` ON `claim_versions` (`claim_id`,`version`);--> statement-breakpoint
CREATE TABLE `claims` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text NOT NULL,
	`number` integer NOT NULL,
	`version` integer DEFAULT 1 NOT NULL,
	`input` text NOT NULL,
	`inequality_id` text,
	`scale` text DEFAULT '1' NOT NULL,
	`shift` text DEFAULT '0' NOT NULL,
	`subject` text NOT NULL,
	`subject_latex` text,
	`quantity` text NOT NULL,
	`quantity_label` text NOT NULL,
	`relation` text NOT NULL,
	`printed` text NOT NULL,
	`reading` text NOT NULL,
	`sort_value` real NOT NULL,
	`method` text DEFAULT '' NOT NULL,
	`reference_id` text NOT NULL,
	`locator` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`state` text DEFAULT 'active' NOT NULL,
	`superseded_by_id` text,
	`visibility` text DEFAULT 'group' NOT NULL,
	`published_by` text,
	`published_at` integer,
	`verdict` text NOT NULL,
	`status` text DEFAULT 'open' NOT NULL,
	`recomputation_id` text,
	`created_by` text NOT NULL,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`inequality_id`) REFERENCES `inequalities`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`reference_id`) REFERENCES `references`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`published_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`recomputation_id`) REFERENCES `recomputations`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `claims_number` ON `claims` (`group_id`,`number`);--> statement-breakpoint
CREATE INDEX `claims_inequality` ON `claims` (`inequality_id`);--> statement-breakpoint
CREATE INDEX `claims_reference` ON `claims` (`reference_id`);--> statement-breakpoint
CREATE INDEX `claims_recomputation` ON `claims` (`recomputation_id`);--> statement-breakpoint
CREATE INDEX `claims_public` ON `claims` (`visibility`,`status`);--> statement-breakpoint
CREATE TABLE `verdicts` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`claim_version` integer NOT NULL,
	`status` text NOT NULL,
	`verdict` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `verdicts_claim` ON `verdicts` (`claim_id`);--> statement-breakpoint
CREATE TABLE `outbox` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`dedupe_key` text NOT NULL,
	`message_id` text NOT NULL,
	`user_id` text NOT NULL,
	`claim_id` text NOT NULL,
	`state` text DEFAULT 'waiting' NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`not_before` integer NOT NULL,
	`last_error` text,
	`created_at` integer NOT NULL,
	`sent_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `outbox_dedupe_key_unique` ON `outbox` (`dedupe_key`);--> statement-breakpoint
CREATE INDEX `outbox_waiting` ON `outbox` (`state`,`not_before`);--> statement-breakpoint
CREATE TABLE `audit` (
	`id` text PRIMARY KEY NOT NULL,
	`group_id` text,
	`actor_id` text,
	`action` text NOT NULL,
	`entity` text NOT NULL,
	`entity_id` text NOT NULL,
	`before` text,
	`after` text,
	`request_id` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`group_id`) REFERENCES `groups`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`actor_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `audit_group` ON `audit` (`group_id`,`at`);--> statement-breakpoint
CREATE INDEX `audit_entity` ON `audit` (`entity`,`entity_id`);