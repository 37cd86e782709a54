CREATE TABLE `results` (
	`recomputation_id` text PRIMARY KEY NOT NULL,
	`result` text NOT NULL,
	FOREIGN KEY (`recomputation_id`) REFERENCES `recomputations`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
ALTER TABLE `recomputations` ADD `summary` text;
--> statement-breakpoint
INSERT INTO `results` (`recomputation_id`, `result`) SELECT `id`, `result` FROM `recomputations` WHERE `result` IS NOT NULL;
--> statement-breakpoint
UPDATE `recomputations` SET `summary` = json_set(
	json_remove(`result`, '$.problem'),
	'$.certificate',
	json(CASE `result` ->> '$.certificate.kind'
		WHEN 'enclosure' THEN json_object('kind', 'enclosure', 'upperLevel', json(`result` -> '$.certificate.upperLevel'))
		ELSE iif(`result` ->> '$.certificate.kind' IS NULL, 'null', json_object('kind', `result` ->> '$.certificate.kind'))
	END)
) WHERE `result` IS NOT NULL;
