ALTER TABLE `claims` ADD `other_base_recomputation_id` text REFERENCES recomputations(id);--> statement-breakpoint
CREATE INDEX `claims_other_base` ON `claims` (`other_base_recomputation_id`);