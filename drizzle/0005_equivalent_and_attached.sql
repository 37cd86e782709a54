CREATE TABLE `inequality_redirects` (
	`id` text PRIMARY KEY NOT NULL,
	`kept_id` text NOT NULL,
	`scale` text NOT NULL,
	`shift` text NOT NULL,
	`name` text,
	`outputs` text NOT NULL,
	`terms` text NOT NULL,
	`latex` text NOT NULL,
	`merged_at` integer NOT NULL,
	FOREIGN KEY (`kept_id`) REFERENCES `inequalities`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `inequality_redirects_kept` ON `inequality_redirects` (`kept_id`);--> statement-breakpoint
CREATE TABLE `earlier_results` (
	`id` text PRIMARY KEY NOT NULL,
	`recomputation_id` text NOT NULL,
	`solver` text NOT NULL,
	`summary` text NOT NULL,
	`lower` real,
	`upper` real,
	`exact` text,
	`check_note` text,
	`finished_at` integer NOT NULL,
	`result` text NOT NULL,
	FOREIGN KEY (`recomputation_id`) REFERENCES `recomputations`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `earlier_results_run` ON `earlier_results` (`recomputation_id`);--> statement-breakpoint
CREATE TABLE `attached_certificates` (
	`id` text PRIMARY KEY NOT NULL,
	`claim_id` text NOT NULL,
	`source` text DEFAULT '' NOT NULL,
	`sha256` text NOT NULL,
	`bytes` integer NOT NULL,
	`finding` text NOT NULL,
	`attached_by` text NOT NULL,
	`attached_at` integer NOT NULL,
	`certificate` text NOT NULL,
	FOREIGN KEY (`claim_id`) REFERENCES `claims`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`attached_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `attached_certificates_claim` ON `attached_certificates` (`claim_id`);--> statement-breakpoint
ALTER TABLE `recomputations` ADD `solver` text;--> statement-breakpoint
ALTER TABLE `recomputations` ADD `renewal` integer DEFAULT false NOT NULL;