CREATE TABLE `recording_likenesses` (
	`recording_id` text NOT NULL,
	`other_id` text NOT NULL,
	`kind` text NOT NULL,
	`channel` integer NOT NULL,
	`other_channel` integer NOT NULL,
	`offset_s` real NOT NULL,
	PRIMARY KEY(`recording_id`, `other_id`),
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`other_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `recording_likenesses_other_idx` ON `recording_likenesses` (`other_id`);--> statement-breakpoint
CREATE TABLE `recording_sound_keys` (
	`key` integer NOT NULL,
	`recording_id` text NOT NULL,
	`channel` integer NOT NULL,
	`step` integer NOT NULL,
	PRIMARY KEY(`key`, `recording_id`, `channel`, `step`),
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `recording_sounds` (
	`recording_id` text NOT NULL,
	`channel` integer NOT NULL,
	`pcm_sha256` text NOT NULL,
	`words` blob NOT NULL,
	PRIMARY KEY(`recording_id`, `channel`),
	FOREIGN KEY (`recording_id`) REFERENCES `recordings`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `recording_sounds_pcm_idx` ON `recording_sounds` (`pcm_sha256`);