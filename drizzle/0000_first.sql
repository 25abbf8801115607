CREATE TABLE `audit_log` (
	`id` text PRIMARY KEY NOT NULL,
	`sequence` integer NOT NULL,
	`at_ms` integer NOT NULL,
	`person_id` text,
	`action` text NOT NULL,
	`subject_type` text NOT NULL,
	`subject_id` text NOT NULL,
	`lab_id` text,
	`detail` text NOT NULL,
	`hash` text NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `audit_log_sequence_unique` ON `audit_log` (`sequence`);--> statement-breakpoint
CREATE INDEX `audit_log_subject_idx` ON `audit_log` (`subject_id`);--> statement-breakpoint
CREATE INDEX `audit_log_person_idx` ON `audit_log` (`person_id`,`sequence`);--> statement-breakpoint
CREATE INDEX `audit_log_action_idx` ON `audit_log` (`action`,`sequence`);--> statement-breakpoint
CREATE TABLE `artifacts` (
	`release_id` text PRIMARY KEY NOT NULL,
	`file_name` text NOT NULL,
	`size_bytes` integer NOT NULL,
	`sha256` text NOT NULL,
	`files` text NOT NULL,
	`verified_at_ms` integer NOT NULL,
	FOREIGN KEY (`release_id`) REFERENCES `releases`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `collection_items` (
	`collection_id` text NOT NULL,
	`recording_id` text NOT NULL,
	`added_at_ms` integer NOT NULL,
	PRIMARY KEY(`collection_id`, `recording_id`),
	FOREIGN KEY (`collection_id`) REFERENCES `collections`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `collection_items_recording_idx` ON `collection_items` (`recording_id`);--> statement-breakpoint
CREATE TABLE `collection_labelers` (
	`collection_id` text NOT NULL,
	`labeler_id` text NOT NULL,
	`ordinal` integer NOT NULL,
	PRIMARY KEY(`collection_id`, `labeler_id`),
	FOREIGN KEY (`collection_id`) REFERENCES `collections`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`labeler_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `collection_labelers_ordinal_idx` ON `collection_labelers` (`collection_id`,`ordinal`);--> statement-breakpoint
CREATE TABLE `collections` (
	`id` text PRIMARY KEY NOT NULL,
	`slug` text NOT NULL,
	`title` text NOT NULL,
	`description` text NOT NULL,
	`publisher` text NOT NULL,
	`contact_email` text NOT NULL,
	`creators` text NOT NULL,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `collections_slug_unique` ON `collections` (`slug`);--> statement-breakpoint
CREATE TABLE `release_items` (
	`release_id` text NOT NULL,
	`recording_id` text NOT NULL,
	PRIMARY KEY(`release_id`, `recording_id`),
	FOREIGN KEY (`release_id`) REFERENCES `releases`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `release_items_recording_idx` ON `release_items` (`recording_id`);--> statement-breakpoint
CREATE TABLE `release_snapshots` (
	`sha256` text PRIMARY KEY NOT NULL,
	`size_bytes` integer NOT NULL,
	`created_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `releases` (
	`id` text PRIMARY KEY NOT NULL,
	`collection_id` text NOT NULL,
	`version` text NOT NULL,
	`state` text NOT NULL,
	`licence` text NOT NULL,
	`notes` text NOT NULL,
	`release_date` text NOT NULL,
	`snapshot_sha256` text NOT NULL,
	`summary` text NOT NULL,
	`recording_count` integer NOT NULL,
	`event_count` integer NOT NULL,
	`progress` real DEFAULT 0 NOT NULL,
	`failure` text,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`published_at_ms` integer,
	`withdrawn_at_ms` integer,
	`withdrawn_reason` text,
	FOREIGN KEY (`collection_id`) REFERENCES `collections`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`snapshot_sha256`) REFERENCES `release_snapshots`(`sha256`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `releases_version_idx` ON `releases` (`collection_id`,`version`);--> statement-breakpoint
CREATE INDEX `releases_state_idx` ON `releases` (`state`,`published_at_ms`);--> statement-breakpoint
CREATE TABLE `event_revisions` (
	`event_id` text NOT NULL,
	`revision` integer NOT NULL,
	`state` text NOT NULL,
	`by_id` text NOT NULL,
	`at_ms` integer NOT NULL,
	PRIMARY KEY(`event_id`, `revision`),
	FOREIGN KEY (`event_id`) REFERENCES `events`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `events` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`pass_id` text NOT NULL,
	`channel` integer NOT NULL,
	`start_sample` integer NOT NULL,
	`end_sample` integer NOT NULL,
	`low_hz` real,
	`high_hz` real,
	`class_key` text NOT NULL,
	`confidence` text NOT NULL,
	`note` text NOT NULL,
	`origin` text NOT NULL,
	`candidate_id` text,
	`parameters` text,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`deleted_at_ms` integer,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`pass_id`) REFERENCES `passes`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`candidate_id`) REFERENCES `candidates`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `events_recording_idx` ON `events` (`recording_id`,`start_sample`);--> statement-breakpoint
CREATE INDEX `events_pass_idx` ON `events` (`pass_id`,`start_sample`);--> statement-breakpoint
CREATE TABLE `label_schemes` (
	`version` integer PRIMARY KEY NOT NULL,
	`classes` text NOT NULL,
	`created_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE `passes` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`labeler_id` text NOT NULL,
	`assigned_by_id` text NOT NULL,
	`blind` integer NOT NULL,
	`state` text NOT NULL,
	`due_at_ms` integer,
	`instructions` text NOT NULL,
	`remark` text DEFAULT '' NOT NULL,
	`scheme_version` integer NOT NULL,
	`created_at_ms` integer NOT NULL,
	`finished_at_ms` integer,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`labeler_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`assigned_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`scheme_version`) REFERENCES `label_schemes`(`version`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `passes_labeler_idx` ON `passes` (`labeler_id`,`state`);--> statement-breakpoint
CREATE INDEX `passes_recording_idx` ON `passes` (`recording_id`,`state`);--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`payload` text NOT NULL,
	`state` text NOT NULL,
	`attempts` integer DEFAULT 0 NOT NULL,
	`fence` integer DEFAULT 0 NOT NULL,
	`lease_until_ms` integer,
	`run_after_ms` integer NOT NULL,
	`progress` real DEFAULT 0 NOT NULL,
	`error` text,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE INDEX `jobs_next_idx` ON `jobs` (`state`,`run_after_ms`);--> statement-breakpoint
CREATE TABLE `labs` (
	`id` text PRIMARY KEY NOT NULL,
	`name` text NOT NULL,
	`created_at_ms` integer NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `labs_name_unique` ON `labs` (`name`);--> statement-breakpoint
CREATE TABLE `candidates` (
	`id` text PRIMARY KEY NOT NULL,
	`detector_run_id` text NOT NULL,
	`ordinal` integer NOT NULL,
	`channel` integer NOT NULL,
	`onset_sample` integer NOT NULL,
	`end_sample` integer NOT NULL,
	`peak_db` real,
	`hearing_class` text NOT NULL,
	`parameters` text NOT NULL,
	FOREIGN KEY (`detector_run_id`) REFERENCES `detector_runs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `candidates_ordinal_idx` ON `candidates` (`detector_run_id`,`ordinal`);--> statement-breakpoint
CREATE INDEX `candidates_onset_idx` ON `candidates` (`detector_run_id`,`onset_sample`);--> statement-breakpoint
CREATE INDEX `candidates_peak_idx` ON `candidates` (`detector_run_id`,`peak_db`);--> statement-breakpoint
CREATE TABLE `detector_runs` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`measurement_id` text NOT NULL,
	`detector_version` text NOT NULL,
	`settings` text NOT NULL,
	`candidate_count` integer NOT NULL,
	`created_at_ms` integer NOT NULL,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`measurement_id`) REFERENCES `measurements`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `detector_runs_recording_idx` ON `detector_runs` (`recording_id`,`created_at_ms`);--> statement-breakpoint
CREATE TABLE `measurements` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`version` integer NOT NULL,
	`summary` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `measurements_recording_idx` ON `measurements` (`recording_id`,`created_at_ms`);--> statement-breakpoint
CREATE TABLE `recording_findings` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`kind` text NOT NULL,
	`sentence` text NOT NULL,
	`place` text,
	`found_at_ms` integer NOT NULL,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `recording_findings_recording_idx` ON `recording_findings` (`recording_id`);--> statement-breakpoint
CREATE TABLE `recording_segments` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`start_sample` integer NOT NULL,
	`frames` integer NOT NULL,
	`run_time_ns` integer,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `recording_segments_start_idx` ON `recording_segments` (`recording_id`,`start_sample`);--> statement-breakpoint
CREATE TABLE `recordings` (
	`id` text PRIMARY KEY NOT NULL,
	`run_id` text NOT NULL,
	`lab_id` text NOT NULL,
	`setup_id` text NOT NULL,
	`uploaded_by_id` text NOT NULL,
	`file_name` text NOT NULL,
	`size_bytes` integer NOT NULL,
	`sha256` text NOT NULL,
	`format` text NOT NULL,
	`licence` text NOT NULL,
	`sensitivity` text NOT NULL,
	`note` text NOT NULL,
	`run_offset_ns` integer,
	`clock_ppm` real DEFAULT 0 NOT NULL,
	`time_expansion` real DEFAULT 1 NOT NULL,
	`processing` text NOT NULL,
	`progress` real DEFAULT 0 NOT NULL,
	`failure` text,
	`sharing` text NOT NULL,
	`held_at_ms` integer,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`setup_id`) REFERENCES `setups`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`uploaded_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `recordings_run_idx` ON `recordings` (`run_id`);--> statement-breakpoint
CREATE INDEX `recordings_lab_idx` ON `recordings` (`lab_id`,`created_at_ms`);--> statement-breakpoint
CREATE INDEX `recordings_sharing_idx` ON `recordings` (`sharing`,`created_at_ms`);--> statement-breakpoint
CREATE INDEX `recordings_sha256_idx` ON `recordings` (`sha256`);--> statement-breakpoint
CREATE INDEX `recordings_created_idx` ON `recordings` (`created_at_ms`);--> statement-breakpoint
CREATE TABLE `reviews` (
	`id` text PRIMARY KEY NOT NULL,
	`recording_id` text NOT NULL,
	`reviewer_id` text NOT NULL,
	`decision` text NOT NULL,
	`reason` text NOT NULL,
	`sharing` text NOT NULL,
	`decided_at_ms` integer NOT NULL,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`reviewer_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `reviews_recording_idx` ON `reviews` (`recording_id`,`decided_at_ms`);--> statement-breakpoint
CREATE TABLE `runs` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`title` text NOT NULL,
	`kind` text NOT NULL,
	`material` text NOT NULL,
	`composition` text,
	`process` text NOT NULL,
	`container` text,
	`cooling` text,
	`cooling_rate_k_per_s` real,
	`pressure_pa` real,
	`start_temperature_c` real,
	`supercooling_k` real,
	`started_at_ms` integer,
	`specimen` text,
	`credits` text NOT NULL,
	`notes` text,
	`created_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`updated_at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`created_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `runs_lab_idx` ON `runs` (`lab_id`,`created_at_ms`);--> statement-breakpoint
CREATE INDEX `runs_created_idx` ON `runs` (`created_at_ms`);--> statement-breakpoint
CREATE INDEX `runs_material_idx` ON `runs` (`material`);--> statement-breakpoint
CREATE TABLE `sensors` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`name` text NOT NULL,
	`kind` text NOT NULL,
	`model` text,
	`serial` text,
	`low_hz` real,
	`high_hz` real,
	`sensitivity` text,
	`created_at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sensors_lab_idx` ON `sensors` (`lab_id`);--> statement-breakpoint
CREATE TABLE `setups` (
	`id` text PRIMARY KEY NOT NULL,
	`sensor_id` text NOT NULL,
	`name` text NOT NULL,
	`coupling` text,
	`mounting` text,
	`distance_m` real,
	`preamp_gain_db` real,
	`filter_low_hz` real,
	`filter_high_hz` real,
	`automatic_gain` text NOT NULL,
	`full_scale_v` real,
	`checked_at_ms` integer,
	`created_at_ms` integer NOT NULL,
	`revision` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`sensor_id`) REFERENCES `sensors`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `setups_sensor_idx` ON `setups` (`sensor_id`);--> statement-breakpoint
CREATE TABLE `api_tokens` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`name` text NOT NULL,
	`token_hash` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`last_used_at_ms` integer,
	`revoked_at_ms` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `api_tokens_tokenHash_unique` ON `api_tokens` (`token_hash`);--> statement-breakpoint
CREATE INDEX `api_tokens_user_idx` ON `api_tokens` (`user_id`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`user_agent` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_at_ms` integer NOT NULL,
	`ended_at_ms` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sessions_user_idx` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `uploads` (
	`id` text PRIMARY KEY NOT NULL,
	`lab_id` text NOT NULL,
	`run_id` text NOT NULL,
	`setup_id` text NOT NULL,
	`owner_id` text NOT NULL,
	`file_name` text NOT NULL,
	`size_bytes` integer NOT NULL,
	`licence` text NOT NULL,
	`sensitivity` text NOT NULL,
	`note` text NOT NULL,
	`run_offset_ns` integer,
	`time_expansion` real NOT NULL,
	`state` text NOT NULL,
	`stream_id` text,
	`recording_id` text,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`run_id`) REFERENCES `runs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`setup_id`) REFERENCES `setups`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`owner_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `uploads_owner_idx` ON `uploads` (`owner_id`,`state`);--> statement-breakpoint
CREATE INDEX `uploads_expiry_idx` ON `uploads` (`state`,`expires_at_ms`);--> statement-breakpoint
CREATE TABLE `invitations` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`token_hash` text NOT NULL,
	`roles` text NOT NULL,
	`memberships` text NOT NULL,
	`invited_by_id` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`accepted_at_ms` integer,
	FOREIGN KEY (`invited_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `invitations_tokenHash_unique` ON `invitations` (`token_hash`);--> statement-breakpoint
CREATE TABLE `memberships` (
	`user_id` text NOT NULL,
	`lab_id` text NOT NULL,
	`role` text NOT NULL,
	PRIMARY KEY(`user_id`, `lab_id`, `role`),
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`lab_id`) REFERENCES `labs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `memberships_lab_idx` ON `memberships` (`lab_id`);--> statement-breakpoint
CREATE TABLE `service_roles` (
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	PRIMARY KEY(`user_id`, `role`),
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `setup_tokens` (
	`id` text PRIMARY KEY NOT NULL,
	`token_hash` text NOT NULL,
	`created_at_ms` integer NOT NULL,
	`expires_at_ms` integer NOT NULL,
	`used_at_ms` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `setup_tokens_tokenHash_unique` ON `setup_tokens` (`token_hash`);--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text NOT NULL,
	`disabled` integer DEFAULT false NOT NULL,
	`created_at_ms` integer NOT NULL,
	`last_seen_at_ms` integer
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email_unique` ON `users` (`email`);