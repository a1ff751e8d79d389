CREATE TABLE `pattern_applications` (
	`id` text PRIMARY KEY NOT NULL,
	`pile_id` text NOT NULL,
	`pattern` text NOT NULL,
	`by_id` text NOT NULL,
	`at` integer NOT NULL,
	`undone_at` integer,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`pile_id`) REFERENCES `piles`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `pattern_applications_key` ON `pattern_applications` (`pile_id`,`by_id`,`idempotency_key`);--> statement-breakpoint
CREATE TABLE `ruling_answers` (
	`id` text PRIMARY KEY NOT NULL,
	`ruling_id` text NOT NULL,
	`answer_id` text NOT NULL,
	`by_id` text NOT NULL,
	`at` integer NOT NULL,
	FOREIGN KEY (`ruling_id`) REFERENCES `rulings`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`answer_id`) REFERENCES `answers`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `ruling_answers_once` ON `ruling_answers` (`ruling_id`,`answer_id`);--> statement-breakpoint
CREATE TABLE `rulings` (
	`id` text PRIMARY KEY NOT NULL,
	`pile_id` text NOT NULL,
	`question` text NOT NULL,
	`asked_by_id` text NOT NULL,
	`asked_at` integer NOT NULL,
	`decision` text,
	`decided_by_id` text,
	`decided_at` integer,
	`idempotency_key` text NOT NULL,
	FOREIGN KEY (`pile_id`) REFERENCES `piles`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`asked_by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`decided_by_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE INDEX `rulings_pile` ON `rulings` (`pile_id`,`asked_at`);--> statement-breakpoint
CREATE UNIQUE INDEX `rulings_key` ON `rulings` (`pile_id`,`asked_by_id`,`idempotency_key`);--> statement-breakpoint
ALTER TABLE `marks` ADD `pattern_application_id` text;--> statement-breakpoint
CREATE TRIGGER `rulings_decided_once` BEFORE UPDATE ON `rulings` WHEN old.decided_at IS NOT NULL OR new.question <> old.question BEGIN SELECT raise(ABORT, 'a decided ruling never changes'); END;
--> statement-breakpoint
CREATE TRIGGER `rulings_no_delete` BEFORE DELETE ON `rulings` BEGIN SELECT raise(ABORT, 'rulings are kept'); END;
--> statement-breakpoint
CREATE TRIGGER `ruling_answers_no_update` BEFORE UPDATE ON `ruling_answers` BEGIN SELECT raise(ABORT, 'ruling_answers is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `ruling_answers_no_delete` BEFORE DELETE ON `ruling_answers` BEGIN SELECT raise(ABORT, 'ruling_answers is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `pattern_applications_no_delete` BEFORE DELETE ON `pattern_applications` BEGIN SELECT raise(ABORT, 'pattern_applications are kept'); END;
