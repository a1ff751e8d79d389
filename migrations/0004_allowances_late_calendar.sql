CREATE TABLE `allowances` (
	`id` text PRIMARY KEY NOT NULL,
	`set_id` text NOT NULL,
	`membership_id` text NOT NULL,
	`closes_at` integer,
	`waives_late_rule` integer DEFAULT false NOT NULL,
	`reason` text NOT NULL,
	`by_id` text NOT NULL,
	`created_at` integer NOT NULL,
	`withdrawn_at` integer,
	FOREIGN KEY (`set_id`) REFERENCES `sets`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`membership_id`) REFERENCES `memberships`(`id`) ON UPDATE no action ON DELETE no action,
	FOREIGN KEY (`by_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `allowances_student` ON `allowances` (`set_id`,`membership_id`) WHERE withdrawn_at is null;--> statement-breakpoint
CREATE TABLE `calendar_addresses` (
	`id` text PRIMARY KEY NOT NULL,
	`user_id` text NOT NULL,
	`hash` text NOT NULL,
	`created_at` integer NOT NULL,
	`revoked_at` integer,
	FOREIGN KEY (`user_id`) REFERENCES `users`(`id`) ON UPDATE no action ON DELETE no action
);
--> statement-breakpoint
CREATE UNIQUE INDEX `calendar_addresses_hash` ON `calendar_addresses` (`hash`);--> statement-breakpoint
CREATE UNIQUE INDEX `calendar_addresses_person` ON `calendar_addresses` (`user_id`) WHERE revoked_at is null;--> statement-breakpoint
ALTER TABLE `scripts` ADD `closed_at` integer;--> statement-breakpoint
ALTER TABLE `scripts` ADD `released_at` integer;--> statement-breakpoint
ALTER TABLE `sets` ADD `late_rule` text;