ALTER TABLE `measurements` ADD `finished_at_ms` integer;--> statement-breakpoint
UPDATE `measurements` SET `finished_at_ms` = `created_at_ms` WHERE `recording_id` IN (SELECT `id` FROM `recordings` WHERE `processing` = 'measured');
