CREATE TABLE `try_outs` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`revision_id` text NOT NULL,
	`by_id` text NOT NULL,
	`givens` text NOT NULL,
	`answers` text NOT NULL,
	`active_seconds` integer DEFAULT 0 NOT NULL,
	`started_at` integer NOT NULL,
	`saved_at` integer NOT NULL,
	`handed_in_at` integer,
	`results` text,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `try_outs_problem` ON `try_outs` (`problem_id`,`handed_in_at`);--> statement-breakpoint
CREATE UNIQUE INDEX `try_outs_open` ON `try_outs` (`revision_id`,`by_id`) WHERE handed_in_at is null;