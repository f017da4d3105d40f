CREATE TABLE `activity` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`user_id` text,
	`kind` text NOT NULL,
	`object_kind` text NOT NULL,
	`object_id` text NOT NULL,
	`text` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `activity_lab` ON `activity` (`lab_id`,`at`);--> statement-breakpoint
CREATE TABLE `comments` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`object_kind` text NOT NULL,
	`object_id` text NOT NULL,
	`author_id` text,
	`text` text NOT NULL,
	`created_at` integer NOT NULL,
	`deleted_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `comments_object` ON `comments` (`lab_id`,`object_kind`,`object_id`);--> statement-breakpoint
CREATE TABLE `drafts` (
	`scenario_id` text NOT NULL,
	`user_id` text NOT NULL,
	`document` text NOT NULL,
	`base_revision_number` integer NOT NULL,
	`updated_at` integer NOT NULL,
	PRIMARY KEY(`scenario_id`, `user_id`),
	FOREIGN KEY (`scenario_id`) REFERENCES `scenarios`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `labs` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`invented` integer DEFAULT false NOT NULL,
	`created_at` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `login_challenges` (
	`id_hash` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`code_mac` text NOT NULL,
	`state` text NOT NULL,
	`redirect_to` text NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`created_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	`used_at` integer
);
--> statement-breakpoint
CREATE INDEX `login_challenges_email` ON `login_challenges` (`email`,`created_at`);--> statement-breakpoint
CREATE TABLE `materials` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`name` text NOT NULL,
	`layer` text NOT NULL,
	`sources` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	`archived_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `materials_lab` ON `materials` (`lab_id`,`name`);--> statement-breakpoint
CREATE TABLE `measurement_points` (
	`measurement_id` text PRIMARY KEY NOT NULL,
	`data` blob NOT NULL,
	FOREIGN KEY (`measurement_id`) REFERENCES `measurements`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `measurements` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`sample_id` text,
	`raw_file_id` text,
	`name` text NOT NULL,
	`technique` text NOT NULL,
	`bias` text NOT NULL,
	`flux_per_cm2_s` real,
	`temperature_k` real,
	`import_settings` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`instrument` text DEFAULT '' NOT NULL,
	`measured_at` text DEFAULT '' NOT NULL,
	`licence` text DEFAULT '' NOT NULL,
	`invented` integer DEFAULT false NOT NULL,
	`point_count` integer NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	`archived_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`sample_id`) REFERENCES `samples`(`id`) ON UPDATE no action ON DELETE set null,
	FOREIGN KEY (`raw_file_id`) REFERENCES `raw_files`(`id`) ON UPDATE no action ON DELETE restrict,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `measurements_lab` ON `measurements` (`lab_id`,`updated_at`);--> statement-breakpoint
CREATE INDEX `measurements_sample` ON `measurements` (`sample_id`);--> statement-breakpoint
CREATE INDEX `measurements_raw_file` ON `measurements` (`raw_file_id`);--> statement-breakpoint
CREATE TABLE `memberships` (
	`lab_id` text NOT NULL,
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	`created_at` integer NOT NULL,
	PRIMARY KEY(`lab_id`, `user_id`),
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE INDEX `memberships_user` ON `memberships` (`user_id`);--> statement-breakpoint
CREATE TABLE `overlays` (
	`scenario_id` text NOT NULL,
	`measurement_id` text NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	PRIMARY KEY(`scenario_id`, `measurement_id`),
	FOREIGN KEY (`scenario_id`) REFERENCES `scenarios`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`measurement_id`) REFERENCES `measurements`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `overlays_measurement` ON `overlays` (`measurement_id`);--> statement-breakpoint
CREATE TABLE `rate_limits` (
	`key` text PRIMARY KEY NOT NULL,
	`points` integer NOT NULL,
	`expires_at` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `raw_file_chunks` (
	`raw_file_id` text NOT NULL,
	`index` integer NOT NULL,
	`data` blob NOT NULL,
	PRIMARY KEY(`raw_file_id`, `index`),
	FOREIGN KEY (`raw_file_id`) REFERENCES `raw_files`(`id`) ON UPDATE no action ON DELETE cascade,
	CONSTRAINT "raw_file_chunks_at_most_one_mebibyte" CHECK(length("raw_file_chunks"."data") <= 1048576)
);
--> statement-breakpoint
CREATE TABLE `raw_files` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`name` text NOT NULL,
	`sha256` text NOT NULL,
	`size` integer NOT NULL,
	`uploaded_by` text,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`uploaded_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `raw_files_lab` ON `raw_files` (`lab_id`,`sha256`);--> statement-breakpoint
CREATE TABLE `revisions` (
	`id` text PRIMARY KEY NOT NULL,
	`scenario_id` text NOT NULL,
	`number` integer NOT NULL,
	`document` text NOT NULL,
	`hash` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`author_id` text,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`scenario_id`) REFERENCES `scenarios`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null,
	CONSTRAINT "revisions_number_from_one" CHECK("revisions"."number" >= 1)
);
--> statement-breakpoint
CREATE UNIQUE INDEX `revisions_number` ON `revisions` (`scenario_id`,`number`);--> statement-breakpoint
CREATE INDEX `revisions_hash` ON `revisions` (`hash`);--> statement-breakpoint
CREATE TABLE `run_chunks` (
	`run_id` text NOT NULL,
	`index` integer NOT NULL,
	`data` blob NOT NULL,
	PRIMARY KEY(`run_id`, `index`),
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE TABLE `runs` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`hash` text NOT NULL,
	`solver_version` text NOT NULL,
	`document` text NOT NULL,
	`status` text NOT NULL,
	`summary` text,
	`error_message` text,
	`milliseconds` real,
	`requested_by` text,
	`created_at` integer NOT NULL,
	`started_at` integer,
	`finished_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`requested_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE UNIQUE INDEX `runs_hash` ON `runs` (`lab_id`,`hash`);--> statement-breakpoint
CREATE TABLE `samples` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`name` text NOT NULL,
	`group` text DEFAULT '' NOT NULL,
	`contact_sequence` text DEFAULT '' NOT NULL,
	`active_area_cm2` real,
	`lit_area_cm2` real,
	`masked_area_cm2` real,
	`preconditioning` text DEFAULT '' NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	`archived_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `samples_lab` ON `samples` (`lab_id`,`name`);--> statement-breakpoint
CREATE TABLE `scenarios` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`name` text NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	`updated_at` integer NOT NULL,
	`archived_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE INDEX `scenarios_lab` ON `scenarios` (`lab_id`,`updated_at`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`user_id` text NOT NULL,
	`created_at` integer NOT NULL,
	`last_seen_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	`user_agent` text DEFAULT '' NOT NULL,
	`address` text DEFAULT '' NOT NULL,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE cascade
);
--> statement-breakpoint
CREATE UNIQUE INDEX `sessions_token_hash_unique` ON `sessions` (`token_hash`);--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `share_links` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`scenario_id` text NOT NULL,
	`revision_id` text NOT NULL,
	`token_hash` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`exposed` text,
	`measurement_ids` text NOT NULL,
	`created_by` text,
	`created_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	`revoked_at` integer,
	`openings` integer DEFAULT 0 NOT NULL,
	`last_opened_at` integer,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`scenario_id`) REFERENCES `scenarios`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE cascade,
	FOREIGN KEY (`created_by`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE set null
);
--> statement-breakpoint
CREATE UNIQUE INDEX `share_links_token_hash_unique` ON `share_links` (`token_hash`);--> statement-breakpoint
CREATE INDEX `share_links_scenario` ON `share_links` (`scenario_id`);--> statement-breakpoint
CREATE INDEX `share_links_lab` ON `share_links` (`lab_id`);--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`theme` text DEFAULT 'auto' NOT NULL,
	`created_at` integer NOT NULL,
	`disabled_at` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email_unique` ON `users` (`email`);