ALTER TABLE `recordings` ADD `camera` text;--> statement-breakpoint
ALTER TABLE `uploads` ADD `camera` text;