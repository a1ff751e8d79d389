CREATE TABLE `audits` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`digest` text NOT NULL,
	`job_id` text NOT NULL,
	`variants` integer NOT NULL,
	`findings` text NOT NULL,
	`parts` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`job_id`) REFERENCES `jobs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `audits_content` ON `audits` (`problem_id`,`digest`,`at`);--> statement-breakpoint
CREATE TABLE `correction_changes` (
	`id` text PRIMARY KEY NOT NULL,
	`correction_id` text NOT NULL,
	`answer_id` text NOT NULL,
	`before` text NOT NULL,
	`after` text NOT NULL,
	`deed` text NOT NULL,
	FOREIGN KEY (`correction_id`) REFERENCES `corrections`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `correction_changes_answer` ON `correction_changes` (`correction_id`,`answer_id`);--> statement-breakpoint
CREATE INDEX `correction_changes_of` ON `correction_changes` (`answer_id`);--> statement-breakpoint
CREATE TABLE `corrections` (
	`id` text PRIMARY KEY NOT NULL,
	`revision_id` text NOT NULL,
	`part_id` text NOT NULL,
	`content` text NOT NULL,
	`based_on_id` text,
	`course_id` text NOT NULL,
	`reason` text NOT NULL,
	`note` text NOT NULL,
	`state` text DEFAULT 'proposed' NOT NULL,
	`by_id` text NOT NULL,
	`created_at` integer NOT NULL,
	`made_at` integer,
	`preview_job_id` text,
	`job_id` text,
	`idempotency_key` text NOT NULL,
	`version` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`course_id`) REFERENCES `courses`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`preview_job_id`) REFERENCES `jobs`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`job_id`) REFERENCES `jobs`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `corrections_revision` ON `corrections` (`revision_id`,`created_at`);--> statement-breakpoint
CREATE UNIQUE INDEX `corrections_key` ON `corrections` (`revision_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `jobs` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`input` text NOT NULL,
	`state` text DEFAULT 'queued' NOT NULL,
	`done` integer DEFAULT 0 NOT NULL,
	`total` integer DEFAULT 0 NOT NULL,
	`problem` text,
	`started_by_id` text NOT NULL,
	`course_id` text,
	`cancel_asked` integer DEFAULT false NOT NULL,
	`claimed_by` text,
	`alive_at` integer,
	`attempts` integer DEFAULT 0 NOT NULL,
	`created_at` integer NOT NULL,
	`finished_at` integer,
	FOREIGN KEY (`started_by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`course_id`) REFERENCES `courses`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `jobs_waiting` ON `jobs` (`state`,`created_at`);--> statement-breakpoint
ALTER TABLE `answers` ADD `another_look` text;--> statement-breakpoint
ALTER TABLE `set_problems` ADD `correction_id` text;--> statement-breakpoint
CREATE TRIGGER `audits_no_update` BEFORE UPDATE ON `audits` BEGIN SELECT raise(ABORT, 'audits is append-only'); END;--> statement-breakpoint
CREATE TRIGGER `audits_no_delete` BEFORE DELETE ON `audits` BEGIN SELECT raise(ABORT, 'audits is append-only'); END;
