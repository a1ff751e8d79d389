CREATE UNIQUE INDEX `marks_once` ON `marks` (`answer_id`,`kind`) WHERE replaces_id is null;--> statement-breakpoint
CREATE UNIQUE INDEX `marks_replaced_once` ON `marks` (`replaces_id`);