CREATE TABLE `collection_labelers` (
	`collection_id` text NOT NULL,
	`labeler_id` text NOT NULL,
	`ordinal` integer NOT NULL,
	PRIMARY KEY(`collection_id`, `labeler_id`),
	FOREIGN KEY (`collection_id`) REFERENCES `collections`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`labeler_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `collection_labelers_ordinal_idx` ON `collection_labelers` (`collection_id`,`ordinal`);