-- Why a version was frozen, beside who froze it and when.
ALTER TABLE protocol_version ADD COLUMN reason text NOT NULL DEFAULT '' CHECK (length(reason) <= 2000);
--> statement-breakpoint
-- What a version that changes a running study declares about the people in flight.
CREATE TABLE amendment (
  protocol_version_id uuid PRIMARY KEY REFERENCES protocol_version (id),
  study_id uuid NOT NULL REFERENCES study (id),
  amends_id uuid NOT NULL REFERENCES protocol_version (id),
  effective_on date NOT NULL,
  follows text NOT NULL CHECK (follows IN ('new-people', 'in-flight')),
  renewal text NOT NULL CHECK (renewal IN ('nobody', 'visits-to-come', 'everybody')),
  without_renewal text NOT NULL CHECK (without_renewal IN ('stays', 'stops')),
  declared_by uuid NOT NULL REFERENCES person (id),
  declared_at timestamptz NOT NULL,
  CHECK (amends_id <> protocol_version_id)
);
--> statement-breakpoint
CREATE INDEX amendment_study ON amendment (study_id);
--> statement-breakpoint
-- The letter of an ethics board as it came; kept as it is.
CREATE TABLE ethics_letter (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  study_id uuid NOT NULL REFERENCES study (id),
  approval_id uuid NOT NULL REFERENCES ethics_approval (id),
  file_name text NOT NULL CHECK (length(file_name) BETWEEN 1 AND 200),
  media_type text NOT NULL CHECK (media_type IN ('application/pdf', 'image/png', 'image/jpeg')),
  byte_count integer NOT NULL CHECK (byte_count BETWEEN 1 AND 10485760),
  sha256 text NOT NULL CHECK (sha256 ~ '^[0-9a-f]{64}$'),
  content bytea NOT NULL CHECK (octet_length(content) = byte_count),
  added_by uuid NOT NULL REFERENCES person (id),
  added_at timestamptz NOT NULL,
  UNIQUE (approval_id, sha256)
);
--> statement-breakpoint
CREATE INDEX ethics_letter_study ON ethics_letter (study_id);
--> statement-breakpoint
-- A comment on one line or part of a version; an answer names the comment it answers.
CREATE TABLE protocol_comment (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  study_id uuid NOT NULL REFERENCES study (id),
  protocol_version_id uuid NOT NULL REFERENCES protocol_version (id),
  part_key text NOT NULL CHECK (length(part_key) BETWEEN 1 AND 60),
  line_key text CHECK (length(line_key) BETWEEN 1 AND 200),
  answers_id uuid REFERENCES protocol_comment (id),
  body text NOT NULL CHECK (length(body) BETWEEN 1 AND 4000),
  written_by uuid NOT NULL REFERENCES person (id),
  written_at timestamptz NOT NULL,
  resolved_by uuid REFERENCES person (id),
  resolved_at timestamptz,
  CHECK (num_nonnulls(resolved_by, resolved_at) IN (0, 2)),
  CHECK (answers_id IS NULL OR resolved_at IS NULL)
);
--> statement-breakpoint
CREATE INDEX protocol_comment_version ON protocol_comment (protocol_version_id);
--> statement-breakpoint
-- Each decision, and each settlement, held against the approved envelope of its version.
CREATE TABLE envelope_check (
  id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
  study_id uuid NOT NULL REFERENCES study (id),
  protocol_hash text NOT NULL,
  decision_id uuid NOT NULL REFERENCES decision (id),
  source text NOT NULL CHECK (source IN ('decision', 'settlement')),
  breaches jsonb NOT NULL,
  checked_at timestamptz NOT NULL,
  UNIQUE (decision_id, source)
);
--> statement-breakpoint
CREATE INDEX envelope_check_study ON envelope_check (study_id, protocol_hash);
--> statement-breakpoint
CREATE TRIGGER amendment_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON amendment EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ethics_letter_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON ethics_letter EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER envelope_check_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON envelope_check EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
GRANT SELECT, INSERT ON amendment, ethics_letter, envelope_check, protocol_comment TO ovalry_app;
--> statement-breakpoint
GRANT UPDATE (resolved_by, resolved_at) ON protocol_comment TO ovalry_app;
