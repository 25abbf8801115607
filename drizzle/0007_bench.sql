CREATE TABLE `condition_traces` (
	`id` text PRIMARY KEY NOT NULL,
	`run_id` text NOT NULL,
	`name` text NOT NULL,
	`quantity` text NOT NULL,
	`unit` text NOT NULL,
	`file_name` text NOT NULL,
	`sha256` text NOT NULL,
	`size_bytes` integer NOT NULL,
	`mapping` text NOT NULL,
	`points_sha256` text NOT NULL,
	`points` integer NOT NULL,
	`duration_s` real NOT NULL,
	`minimum` real NOT NULL,
	`maximum` real NOT NULL,
	`run_offset_ns` integer NOT NULL,
	`clock_ppm` real DEFAULT 0 NOT NULL,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`deleted_at_ms` integer,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `condition_traces_run_idx` ON `condition_traces` (`run_id`);--> statement-breakpoint
CREATE TABLE `growth_phases` (
	`id` text PRIMARY KEY NOT NULL,
	`run_id` text NOT NULL,
	`pass_id` text,
	`phase` text NOT NULL,
	`start_ns` integer NOT NULL,
	`end_ns` integer NOT NULL,
	`basis` text NOT NULL,
	`confidence` text NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`is_sound_open` integer NOT NULL,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`deleted_at_ms` integer,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`pass_id`) REFERENCES `passes`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `growth_phases_run_idx` ON `growth_phases` (`run_id`,`start_ns`);--> statement-breakpoint
CREATE TABLE `videos` (
	`id` text PRIMARY KEY NOT NULL,
	`run_id` text NOT NULL,
	`file_name` text NOT NULL,
	`container` text NOT NULL,
	`sha256` text NOT NULL,
	`size_bytes` integer NOT NULL,
	`duration_s` real,
	`width_px` integer,
	`height_px` integer,
	`frames_per_s` real,
	`run_offset_ns` integer,
	`clock_ppm` real DEFAULT 0 NOT NULL,
	`sync_marks` text NOT NULL,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`deleted_at_ms` integer,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `videos_run_idx` ON `videos` (`run_id`);--> statement-breakpoint
CREATE TABLE `candidate_verdicts` (
	`id` text PRIMARY KEY NOT NULL,
	`pass_id` text NOT NULL,
	`candidate_id` text NOT NULL,
	`verdict` text NOT NULL,
	`event_id` text,
	`group_key` text,
	`is_spot_check` integer DEFAULT false NOT NULL,
	`took_ms` integer,
	`by_id` text NOT NULL,
	`at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`pass_id`) REFERENCES `passes`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`candidate_id`) REFERENCES `candidates`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`event_id`) REFERENCES `events`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `candidate_verdicts_candidate_idx` ON `candidate_verdicts` (`pass_id`,`candidate_id`);--> statement-breakpoint
CREATE TABLE `coverage_spans` (
	`id` text PRIMARY KEY NOT NULL,
	`pass_id` text NOT NULL,
	`way` text NOT NULL,
	`channel` integer NOT NULL,
	`start_sample` integer NOT NULL,
	`end_sample` integer NOT NULL,
	`detail` real NOT NULL,
	`first_at_ms` integer NOT NULL,
	`last_at_ms` integer NOT NULL,
	FOREIGN KEY (`pass_id`) REFERENCES `passes`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `coverage_spans_pass_idx` ON `coverage_spans` (`pass_id`,`way`,`channel`,`start_sample`);--> statement-breakpoint
ALTER TABLE `events` ADD `raw_start_sample` integer;--> statement-breakpoint
ALTER TABLE `events` ADD `uncertainty_samples` real;--> statement-breakpoint
ALTER TABLE `events` ADD `aids` text;--> statement-breakpoint
ALTER TABLE `events` ADD `view` text;--> statement-breakpoint
ALTER TABLE `passes` ADD `task` text DEFAULT 'events' NOT NULL;--> statement-breakpoint
ALTER TABLE `passes` ADD `kind` text DEFAULT 'whole' NOT NULL;--> statement-breakpoint
ALTER TABLE `passes` ADD `windows` text;--> statement-breakpoint
ALTER TABLE `passes` ADD `window_seed` integer;--> statement-breakpoint
ALTER TABLE `passes` ADD `round_order` text;--> statement-breakpoint
ALTER TABLE `passes` ADD `coverage` text;