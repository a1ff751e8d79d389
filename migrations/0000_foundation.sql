CREATE TABLE `answer_versions` (
	`id` text PRIMARY KEY NOT NULL,
	`answer_id` text NOT NULL,
	`number` integer NOT NULL,
	`text` text NOT NULL,
	`saved_at` integer NOT NULL,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `answer_versions_number` ON `answer_versions` (`answer_id`,`number`);--> statement-breakpoint
CREATE UNIQUE INDEX `answer_versions_key` ON `answer_versions` (`answer_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `answers` (
	`id` text PRIMARY KEY NOT NULL,
	`script_id` text NOT NULL,
	`pile_id` text NOT NULL,
	`state` text,
	`check_id` text,
	`standing_mark_id` text,
	`set_aside_reason` text,
	`set_aside_by_id` text,
	`version` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`script_id`) REFERENCES `scripts`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`pile_id`) REFERENCES `piles`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`set_aside_by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action,
	CONSTRAINT "answers_marked" CHECK("answers"."state" is not 'marked' or "answers"."standing_mark_id" is not null)
);
--> statement-breakpoint
CREATE UNIQUE INDEX `answers_part` ON `answers` (`script_id`,`pile_id`);--> statement-breakpoint
CREATE INDEX `answers_pile` ON `answers` (`pile_id`,`state`);--> statement-breakpoint
CREATE TABLE `checks` (
	`id` text PRIMARY KEY NOT NULL,
	`answer_id` text NOT NULL,
	`submission_id` text NOT NULL,
	`result` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`submission_id`) REFERENCES `submissions`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `checks_answer` ON `checks` (`answer_id`);--> statement-breakpoint
CREATE TABLE `courses` (
	`id` text PRIMARY KEY NOT NULL,
	`title` text NOT NULL,
	`term` text NOT NULL,
	`time_zone` text NOT NULL,
	`vacuum_variance` real DEFAULT 0.5 NOT NULL,
	`squeezing_sign` integer DEFAULT 1 NOT NULL,
	`splitter_phase` real DEFAULT 1.5707963267948966 NOT NULL,
	`created_at` integer NOT NULL,
	`version` integer DEFAULT 1 NOT NULL
);
--> statement-breakpoint
CREATE TABLE `guesses` (
	`subject` text PRIMARY KEY NOT NULL,
	`failures` integer NOT NULL,
	`since` integer NOT NULL,
	`locked_until` integer
);
--> statement-breakpoint
CREATE TABLE `holds` (
	`answer_id` text PRIMARY KEY NOT NULL,
	`membership_id` text NOT NULL,
	`bench_id` text NOT NULL,
	`kind` text NOT NULL,
	`taken_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`membership_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `holds_holder` ON `holds` (`membership_id`,`bench_id`);--> statement-breakpoint
CREATE TABLE `letters` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`user_id` text NOT NULL,
	`subject` text NOT NULL,
	`text` text NOT NULL,
	`created_at` integer NOT NULL,
	`due_at` integer NOT NULL,
	`sent_at` integer,
	`attempts` integer DEFAULT 0 NOT NULL,
	`last_error` text,
	`cancelled_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `letters_waiting` ON `letters` (`sent_at`,`due_at`);--> statement-breakpoint
CREATE TABLE `marks` (
	`id` text PRIMARY KEY NOT NULL,
	`answer_id` text NOT NULL,
	`kind` text NOT NULL,
	`marker_id` text,
	`criteria` text NOT NULL,
	`total` real NOT NULL,
	`remark` text DEFAULT '' NOT NULL,
	`at` integer NOT NULL,
	`replaces_id` text,
	`reason` text,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`marker_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `marks_answer` ON `marks` (`answer_id`,`at`);--> statement-breakpoint
CREATE UNIQUE INDEX `marks_key` ON `marks` (`answer_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `memberships` (
	`id` text PRIMARY KEY NOT NULL,
	`course_id` text NOT NULL,
	`user_id` text NOT NULL,
	`role` text NOT NULL,
	`initials` text,
	`hue` integer,
	`created_at` integer NOT NULL,
	`removed_at` integer,
	FOREIGN KEY (`course_id`) REFERENCES `courses`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `memberships_person` ON `memberships` (`course_id`,`user_id`);--> statement-breakpoint
CREATE INDEX `memberships_user` ON `memberships` (`user_id`);--> statement-breakpoint
CREATE TABLE `pages` (
	`id` text PRIMARY KEY NOT NULL,
	`answer_id` text NOT NULL,
	`storage_key` text NOT NULL,
	`sha256` text NOT NULL,
	`media_type` text NOT NULL,
	`bytes` integer NOT NULL,
	`page_count` integer NOT NULL,
	`added_at` integer NOT NULL,
	`removed_at` integer,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `pages_answer` ON `pages` (`answer_id`);--> statement-breakpoint
CREATE UNIQUE INDEX `pages_key` ON `pages` (`answer_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `piles` (
	`id` text PRIMARY KEY NOT NULL,
	`set_id` text NOT NULL,
	`set_problem_id` text NOT NULL,
	`part_id` text NOT NULL,
	`sequence` integer DEFAULT 0 NOT NULL,
	FOREIGN KEY (`set_id`) REFERENCES `sets`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`set_problem_id`) REFERENCES `set_problems`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `piles_part` ON `piles` (`set_problem_id`,`part_id`);--> statement-breakpoint
CREATE INDEX `piles_set` ON `piles` (`set_id`);--> statement-breakpoint
CREATE TABLE `problems` (
	`id` text PRIMARY KEY NOT NULL,
	`author_id` text NOT NULL,
	`status` text DEFAULT 'draft' NOT NULL,
	`draft` text NOT NULL,
	`draft_saved_at` integer NOT NULL,
	`created_at` integer NOT NULL,
	`version` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE TABLE `record` (
	`id` text PRIMARY KEY NOT NULL,
	`at` integer NOT NULL,
	`actor_id` text,
	`course_id` text,
	`action` text NOT NULL,
	`thing` text NOT NULL,
	`thing_id` text NOT NULL,
	`sentence` text NOT NULL,
	`before` text,
	`after` text,
	`reason` text,
	FOREIGN KEY (`actor_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`course_id`) REFERENCES `courses`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `record_course` ON `record` (`course_id`,`at`);--> statement-breakpoint
CREATE INDEX `record_thing` ON `record` (`thing`,`thing_id`);--> statement-breakpoint
CREATE TABLE `revisions` (
	`id` text PRIMARY KEY NOT NULL,
	`problem_id` text NOT NULL,
	`number` integer NOT NULL,
	`content` text NOT NULL,
	`author_id` text NOT NULL,
	`reason` text NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`author_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `revisions_number` ON `revisions` (`problem_id`,`number`);--> statement-breakpoint
CREATE TABLE `scripts` (
	`id` text PRIMARY KEY NOT NULL,
	`set_id` text NOT NULL,
	`membership_id` text NOT NULL,
	`code` text NOT NULL,
	`created_at` integer NOT NULL,
	FOREIGN KEY (`set_id`) REFERENCES `sets`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`membership_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `scripts_student` ON `scripts` (`set_id`,`membership_id`);--> statement-breakpoint
CREATE UNIQUE INDEX `scripts_code` ON `scripts` (`set_id`,`code`);--> statement-breakpoint
CREATE TABLE `sessions` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`expires_at` integer NOT NULL,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `sessions_user` ON `sessions` (`user_id`);--> statement-breakpoint
CREATE TABLE `set_problems` (
	`id` text PRIMARY KEY NOT NULL,
	`set_id` text NOT NULL,
	`position` integer NOT NULL,
	`problem_id` text NOT NULL,
	`revision_id` text NOT NULL,
	FOREIGN KEY (`set_id`) REFERENCES `sets`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`problem_id`) REFERENCES `problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`revision_id`) REFERENCES `revisions`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `set_problems_set` ON `set_problems` (`set_id`,`position`);--> statement-breakpoint
CREATE INDEX `set_problems_problem` ON `set_problems` (`problem_id`);--> statement-breakpoint
CREATE TABLE `set_stages` (
	`id` text PRIMARY KEY NOT NULL,
	`set_id` text NOT NULL,
	`stage` text NOT NULL,
	`at` integer NOT NULL,
	`by_id` text,
	FOREIGN KEY (`set_id`) REFERENCES `sets`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `set_stages_set` ON `set_stages` (`set_id`,`at`);--> statement-breakpoint
CREATE TABLE `sets` (
	`id` text PRIMARY KEY NOT NULL,
	`course_id` text NOT NULL,
	`number` integer NOT NULL,
	`title` text NOT NULL,
	`cover_text` text DEFAULT '' NOT NULL,
	`stage` text DEFAULT 'draft' NOT NULL,
	`opens_at` integer,
	`closes_at` integer,
	`individual_variants` integer DEFAULT true NOT NULL,
	`show_keys` integer DEFAULT true NOT NULL,
	`seed` text NOT NULL,
	`created_at` integer NOT NULL,
	`version` integer DEFAULT 1 NOT NULL,
	FOREIGN KEY (`course_id`) REFERENCES `courses`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `sets_number` ON `sets` (`course_id`,`number`);--> statement-breakpoint
CREATE TABLE `submissions` (
	`id` text PRIMARY KEY NOT NULL,
	`script_id` text NOT NULL,
	`number` integer NOT NULL,
	`at` integer NOT NULL,
	`by` text NOT NULL,
	`content` text NOT NULL,
	`digest` text NOT NULL,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`script_id`) REFERENCES `scripts`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `submissions_number` ON `submissions` (`script_id`,`number`);--> statement-breakpoint
CREATE UNIQUE INDEX `submissions_key` ON `submissions` (`script_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `tokens` (
	`id` text PRIMARY KEY NOT NULL,
	`kind` text NOT NULL,
	`hash` text NOT NULL,
	`user_id` text,
	`created_at` integer NOT NULL,
	`expires_at` integer NOT NULL,
	`used_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `tokens_hash` ON `tokens` (`hash`);--> statement-breakpoint
CREATE INDEX `tokens_user` ON `tokens` (`user_id`);--> statement-breakpoint
CREATE TABLE `users` (
	`id` text PRIMARY KEY NOT NULL,
	`email` text NOT NULL,
	`name` text NOT NULL,
	`password_hash` text,
	`is_administrator` integer DEFAULT false NOT NULL,
	`created_at` integer NOT NULL
);
--> statement-breakpoint
CREATE UNIQUE INDEX `users_email` ON `users` (`email`);--> statement-breakpoint
CREATE TABLE `variants` (
	`id` text PRIMARY KEY NOT NULL,
	`set_problem_id` text NOT NULL,
	`membership_id` text,
	`givens` text NOT NULL,
	FOREIGN KEY (`set_problem_id`) REFERENCES `set_problems`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`membership_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `variants_student` ON `variants` (`set_problem_id`,`membership_id`);--> statement-breakpoint
CREATE UNIQUE INDEX `variants_shared` ON `variants` (`set_problem_id`) WHERE membership_id is null;