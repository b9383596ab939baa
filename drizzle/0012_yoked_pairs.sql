-- Who follows whom in a yoked arm. A pair once made stays: rows are only ever added.
CREATE TABLE "yoked_pair" (
	"participant_id" uuid PRIMARY KEY NOT NULL REFERENCES "participant"("id"),
	"master_id" uuid NOT NULL UNIQUE REFERENCES "participant"("id"),
	"study_id" uuid NOT NULL REFERENCES "study"("id"),
	"distance" double precision NOT NULL,
	"scales" jsonb NOT NULL,
	"paired_at" timestamp with time zone NOT NULL,
	CONSTRAINT "yoked_pair_two_people" CHECK ("participant_id" <> "master_id")
);
--> statement-breakpoint
CREATE TRIGGER yoked_pair_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON yoked_pair EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
GRANT SELECT, INSERT ON yoked_pair TO ovalry_app;
