DROP INDEX "study_role_once";--> statement-breakpoint
CREATE UNIQUE INDEX "study_role_once" ON "study_role" USING btree ("study_id","person_id","role") WHERE ended_at IS NULL;--> statement-breakpoint
REVOKE UPDATE ON study_role FROM ovalry_app;
--> statement-breakpoint
GRANT UPDATE (confirmed_by, confirmed_at, ended_at) ON study_role TO ovalry_app;
