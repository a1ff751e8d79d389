-- Rows of these tables are facts: none is ever changed or deleted. A migration that rebuilds one of them drops its
-- triggers and must make them again.
CREATE TRIGGER `record_no_update` BEFORE UPDATE ON `record` BEGIN SELECT raise(ABORT, 'record is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `record_no_delete` BEFORE DELETE ON `record` BEGIN SELECT raise(ABORT, 'record is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `marks_no_update` BEFORE UPDATE ON `marks` BEGIN SELECT raise(ABORT, 'marks is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `marks_no_delete` BEFORE DELETE ON `marks` BEGIN SELECT raise(ABORT, 'marks is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `submissions_no_update` BEFORE UPDATE ON `submissions` BEGIN SELECT raise(ABORT, 'submissions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `submissions_no_delete` BEFORE DELETE ON `submissions` BEGIN SELECT raise(ABORT, 'submissions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `answer_versions_no_update` BEFORE UPDATE ON `answer_versions` BEGIN SELECT raise(ABORT, 'answer_versions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `answer_versions_no_delete` BEFORE DELETE ON `answer_versions` BEGIN SELECT raise(ABORT, 'answer_versions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `checks_no_update` BEFORE UPDATE ON `checks` BEGIN SELECT raise(ABORT, 'checks is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `checks_no_delete` BEFORE DELETE ON `checks` BEGIN SELECT raise(ABORT, 'checks is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `revisions_no_update` BEFORE UPDATE ON `revisions` BEGIN SELECT raise(ABORT, 'revisions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `revisions_no_delete` BEFORE DELETE ON `revisions` BEGIN SELECT raise(ABORT, 'revisions is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `set_stages_no_update` BEFORE UPDATE ON `set_stages` BEGIN SELECT raise(ABORT, 'set_stages is append-only'); END;
--> statement-breakpoint
CREATE TRIGGER `set_stages_no_delete` BEFORE DELETE ON `set_stages` BEGIN SELECT raise(ABORT, 'set_stages is append-only'); END;
