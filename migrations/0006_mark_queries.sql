CREATE TABLE `mark_queries` (
	`id` text PRIMARY KEY NOT NULL,
	`answer_id` text NOT NULL,
	`mark_id` text NOT NULL,
	`criterion_id` text,
	`reason` text NOT NULL,
	`policy` text NOT NULL,
	`at` integer NOT NULL,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`mark_id`) REFERENCES `marks`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `mark_queries_answer` ON `mark_queries` (`answer_id`,`at`);--> statement-breakpoint
CREATE UNIQUE INDEX `mark_queries_key` ON `mark_queries` (`answer_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `query_answers` (
	`id` text PRIMARY KEY NOT NULL,
	`query_id` text NOT NULL,
	`by_id` text NOT NULL,
	`at` integer NOT NULL,
	`words` text NOT NULL,
	`mark_id` text NOT NULL,
	`is_changed` integer NOT NULL,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`query_id`) REFERENCES `mark_queries`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`mark_id`) REFERENCES `marks`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `query_answers_query` ON `query_answers` (`query_id`);--> statement-breakpoint
ALTER TABLE `courses` ADD `query_policy` text DEFAULT 'raise or lower' NOT NULL;--> statement-breakpoint
ALTER TABLE `sets` ADD `queries_close_at` integer;--> statement-breakpoint
CREATE TRIGGER `mark_queries_no_update` BEFORE UPDATE ON `mark_queries` BEGIN SELECT raise(ABORT, 'mark_queries is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `mark_queries_no_delete` BEFORE DELETE ON `mark_queries` BEGIN SELECT raise(ABORT, 'mark_queries is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `query_answers_no_update` BEFORE UPDATE ON `query_answers` BEGIN SELECT raise(ABORT, 'query_answers is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `query_answers_no_delete` BEFORE DELETE ON `query_answers` BEGIN SELECT raise(ABORT, 'query_answers is append-only'); END;
