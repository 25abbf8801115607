ALTER TABLE `recording_segments` ADD `pre_trigger_frames` integer;--> statement-breakpoint
ALTER TABLE `recordings` ADD `layout` text;--> statement-breakpoint
ALTER TABLE `recordings` ADD `live_time_ns` integer;--> statement-breakpoint
ALTER TABLE `uploads` ADD `layout` text;