CREATE TABLE `removals` (
	`id` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`upload_ids` text NOT NULL,
	`file_ids` text NOT NULL,
	`created_at_ms` integer NOT NULL
);
