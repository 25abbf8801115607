DROP INDEX `candidates_onset_idx`;--> statement-breakpoint
DROP INDEX `candidates_peak_idx`;--> statement-breakpoint
ALTER TABLE `candidates` ADD `snr_db` real;--> statement-breakpoint
ALTER TABLE `candidates` ADD `peak_frequency_hz` real;--> statement-breakpoint
ALTER TABLE `candidates` ADD `duration_us` real;--> statement-breakpoint
ALTER TABLE `candidates` ADD `energy_fs2_s` real;--> statement-breakpoint
ALTER TABLE `candidates` ADD `ultrasonic_share` real;--> statement-breakpoint
UPDATE `candidates` SET
	`snr_db` = json_extract(`parameters`, '$.snrDb'),
	`peak_frequency_hz` = json_extract(`parameters`, '$.peakFrequencyHz'),
	`duration_us` = json_extract(`parameters`, '$.durationUs'),
	`energy_fs2_s` = json_extract(`parameters`, '$.energyFs2S'),
	`ultrasonic_share` = json_extract(`parameters`, '$.ultrasonicShare');--> statement-breakpoint
CREATE INDEX `candidates_facts_idx` ON `candidates` (`detector_run_id`,`ordinal`,`onset_sample`,`end_sample`,`channel`,`hearing_class`,`snr_db`,`peak_db`,`peak_frequency_hz`,`duration_us`,`energy_fs2_s`,`ultrasonic_share`);