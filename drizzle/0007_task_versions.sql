-- What changed and why, in the words of whoever kept the version.
ALTER TABLE "task" ADD COLUMN "note" text DEFAULT '' NOT NULL;
--> statement-breakpoint
ALTER TABLE "task" ADD CONSTRAINT "task_version_counts" CHECK (version >= 1);
--> statement-breakpoint
ALTER TABLE "task" ADD CONSTRAINT "task_named" CHECK (name = btrim(name) AND name <> '');
--> statement-breakpoint
-- A version of a task never changes: studies and protocols say which one they came from.
REVOKE UPDATE, DELETE ON "task" FROM ovalry_app;
