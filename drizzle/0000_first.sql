CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`device` text DEFAULT '' NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `sessions_by_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `sign_in_failures` (
	`id` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`email` text NOT NULL,
	`address` text NOT NULL,
	`at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE INDEX `sign_in_failures_by_account` ON `sign_in_failures` (`email`,`address`,`at_ms`);--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text NOT NULL,
	`is_administrator` integer DEFAULT false NOT NULL,
	`is_demo` integer DEFAULT false NOT NULL,
	`disabled_at_ms` integer,
	`created_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email_unique` ON `users` (`email`);--> statement-breakpoint
CREATE TABLE `changes` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`revision` integer NOT NULL,
	`user_id` text,
	`type` text NOT NULL,
	`payload` text NOT NULL,
	`at_ms` integer NOT NULL,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE UNIQUE INDEX `changes_revision` ON `changes` (`project_id`,`revision`);--> statement-breakpoint
CREATE TABLE `events` (
	`id` integer PRIMARY KEY AUTOINCREMENT NOT NULL,
	`project_id` text NOT NULL,
	`type` text NOT NULL,
	`payload` text NOT NULL,
	`at_ms` integer NOT NULL,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `events_by_project` ON `events` (`project_id`,`id`);--> statement-breakpoint
CREATE TABLE `questions` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`key` text NOT NULL,
	`kind` text NOT NULL,
	`message` text NOT NULL,
	`evidence` text NOT NULL,
	`frame_ids` text NOT NULL,
	`stack_ids` text NOT NULL,
	`tile` text,
	`answers` text NOT NULL,
	`severity` real NOT NULL,
	`settled_at_ms` integer,
	`settled_by` text,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`settled_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE UNIQUE INDEX `questions_key` ON `questions` (`project_id`,`key`);--> statement-breakpoint
CREATE TABLE `seams` (
	`project_id` text NOT NULL,
	`stack_id` text NOT NULL,
	`neighbour_id` text NOT NULL,
	`side` text NOT NULL,
	`overlap` real,
	PRIMARY KEY(`stack_id`, `neighbour_id`),
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`stack_id`) REFERENCES `stacks`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`neighbour_id`) REFERENCES `stacks`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `seams_by_project` ON `seams` (`project_id`);--> statement-breakpoint
CREATE TABLE `files` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`frame_id` text,
	`upload_id` text NOT NULL,
	`name` text NOT NULL,
	`folder` text,
	`pairing_key` text NOT NULL,
	`last_modified_ms` integer,
	`bytes` integer NOT NULL,
	`sha256` text,
	`media_type` text,
	`state` text NOT NULL,
	`is_raw` integer NOT NULL,
	`reason` text,
	`duplicate_of` text,
	`received_at_ms` integer NOT NULL,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`frame_id`) REFERENCES `frames`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`upload_id`) REFERENCES `uploads`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `files_upload_id_unique` ON `files` (`upload_id`);--> statement-breakpoint
CREATE INDEX `files_by_project` ON `files` (`project_id`,`state`);--> statement-breakpoint
CREATE INDEX `files_by_frame` ON `files` (`frame_id`);--> statement-breakpoint
CREATE INDEX `files_by_pairing_key` ON `files` (`project_id`,`pairing_key`);--> statement-breakpoint
CREATE INDEX `files_by_sha256` ON `files` (`project_id`,`sha256`);--> statement-breakpoint
CREATE TABLE `frames` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`metadata` text,
	`measurements` text,
	`order_taken` integer,
	`stack_id` text,
	`set_aside` text,
	`relative_sharpness` real,
	`shift_x_px` real,
	`shift_y_px` real,
	`pause_before_seconds` real,
	`placed_by` text DEFAULT 'computation' NOT NULL,
	`confidence` real DEFAULT 0 NOT NULL,
	`reason` text DEFAULT '' NOT NULL,
	`created_at_ms` integer NOT NULL,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`stack_id`) REFERENCES `stacks`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `frames_by_project` ON `frames` (`project_id`,`order_taken`);--> statement-breakpoint
CREATE INDEX `frames_by_stack` ON `frames` (`stack_id`);--> statement-breakpoint
CREATE TABLE `stacks` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`row` integer,
	`column` integer,
	`take` integer NOT NULL,
	`is_chosen_take` integer NOT NULL,
	`reference_id` text,
	`is_settled` integer DEFAULT false NOT NULL,
	`share_user_id` text,
	`placed_by` text NOT NULL,
	`confidence` real NOT NULL,
	`reason` text NOT NULL,
	`position_x_px` real,
	`position_y_px` real,
	`spot_x` real NOT NULL,
	`spot_y` real NOT NULL,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`share_user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `stacks_by_project` ON `stacks` (`project_id`);--> statement-breakpoint
CREATE UNIQUE INDEX `stacks_place` ON `stacks` (`project_id`,`row`,`column`,`take`);--> statement-breakpoint
CREATE TABLE `uploads` (
	`id` text PRIMARY KEY NOT NULL,
	`project_id` text NOT NULL,
	`user_id` text NOT NULL,
	`name` text NOT NULL,
	`folder` text,
	`last_modified_ms` integer,
	`length_bytes` integer NOT NULL,
	`metadata_header` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`finished_at_ms` integer,
	`cancelled_at_ms` integer,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `uploads_by_project` ON `uploads` (`project_id`,`finished_at_ms`);--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` text PRIMARY KEY NOT NULL,
	`key` text NOT NULL,
	`kind` text NOT NULL,
	`project_id` text NOT NULL,
	`payload` text NOT NULL,
	`state` text NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`run_after_ms` integer NOT NULL,
	`lease_token` text,
	`lease_until_ms` integer,
	`error` text,
	`created_at_ms` integer NOT NULL,
	`finished_at_ms` integer,
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `jobs_key_unique` ON `jobs` (`key`);--> statement-breakpoint
CREATE INDEX `jobs_to_claim` ON `jobs` (`state`,`run_after_ms`);--> statement-breakpoint
CREATE INDEX `jobs_by_project` ON `jobs` (`project_id`,`state`);--> statement-breakpoint
CREATE TABLE `workers` (
	`id` text PRIMARY KEY NOT NULL,
	`started_at_ms` integer NOT NULL,
	`seen_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `members` (
	`project_id` text NOT NULL,
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	`joined_at_ms` integer NOT NULL,
	PRIMARY KEY(`project_id`, `user_id`),
	FOREIGN KEY (`project_id`) REFERENCES `projects`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `members_by_user` ON `members` (`user_id`);--> statement-breakpoint
CREATE TABLE `projects` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`revision` integer DEFAULT 0 NOT NULL,
	`overlap_wanted` real NOT NULL,
	`frames_least` integer NOT NULL,
	`frames_most` integer NOT NULL,
	`longest_pause_seconds` real,
	`expected_rows` integer,
	`expected_columns` integer,
	`rows` integer DEFAULT 0 NOT NULL,
	`columns` integer DEFAULT 0 NOT NULL,
	`shot_order` text,
	`used_pause_seconds` real,
	`content_version` integer DEFAULT 0 NOT NULL,
	`sorted_version` integer DEFAULT 0 NOT NULL,
	`sorted_at_ms` integer,
	`sort_error` text,
	`is_demo` integer DEFAULT false NOT NULL,
	`archived_at_ms` integer,
	`created_at_ms` integer NOT NULL
);
