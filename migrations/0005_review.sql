CREATE TABLE `problem_comments` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`replies_to_id` text,
	`anchor` text NOT NULL,
	`text` text NOT NULL,
	`wording` text,
	`instead` text,
	`accepted_at` integer,
	`accepted_by_id` text,
	`by_id` text NOT NULL,
	`at` integer NOT NULL,
	`settled_at` integer,
	`settled_by_id` text,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`accepted_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`settled_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `problem_comments_problem` ON `problem_comments` (`problem_id`,`at`);--> statement-breakpoint
CREATE UNIQUE INDEX `problem_comments_key` ON `problem_comments` (`problem_id`,`by_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `review_decisions` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`revision_id` text NOT NULL,
	`kind` text NOT NULL,
	`by_id` text NOT NULL,
	`at` integer NOT NULL,
	`words` text DEFAULT '' NOT NULL,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `review_decisions_problem` ON `review_decisions` (`problem_id`,`at`);--> statement-breakpoint
CREATE TABLE `review_requests` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`colleague_id` text NOT NULL,
	`asked_by_id` text NOT NULL,
	`at` integer NOT NULL,
	`due_at` integer NOT NULL,
	`note` text DEFAULT '' NOT NULL,
	`answered_at` integer,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`colleague_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`asked_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `review_requests_problem` ON `review_requests` (`problem_id`);--> statement-breakpoint
CREATE INDEX `review_requests_colleague` ON `review_requests` (`colleague_id`,`answered_at`);--> statement-breakpoint
CREATE UNIQUE INDEX `review_requests_open` ON `review_requests` (`problem_id`,`colleague_id`) WHERE answered_at is null;--> statement-breakpoint
CREATE TRIGGER `review_decisions_no_update` BEFORE UPDATE ON `review_decisions` BEGIN SELECT raise(ABORT, 'review_decisions is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `review_decisions_no_delete` BEFORE DELETE ON `review_decisions` BEGIN SELECT raise(ABORT, 'review_decisions is append-only'); END;
