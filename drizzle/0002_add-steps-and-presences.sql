CREATE TABLE `presences` (
	`project_id` text NOT NULL,
	`session_id` text NOT NULL,
	`user_id` text NOT NULL,
	`tile` text,
	`seen_at_ms` integer NOT NULL,
	PRIMARY KEY(`project_id`, `session_id`),
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`session_id`) REFERENCES `sessions`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
ALTER TABLE `changes` ADD `steps` text DEFAULT '[]' NOT NULL;--> statement-breakpoint
ALTER TABLE `changes` ADD `sentence` text DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE `changes` ADD `tiles` text DEFAULT '[]' NOT NULL;--> statement-breakpoint
ALTER TABLE `changes` ADD `undoes` text;--> statement-breakpoint
CREATE INDEX `changes_by_person` ON `changes` (`project_id`,`user_id`,`revision`);--> statement-breakpoint
ALTER TABLE `projects` ADD `is_anew_wanted` integer DEFAULT false NOT NULL;