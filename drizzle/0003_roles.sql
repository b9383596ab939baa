-- Which roles may meet in one person and study depends on what the frozen protocol declares.
CREATE FUNCTION study_variants(wanted uuid) RETURNS text[] LANGUAGE sql STABLE AS $$
  SELECT coalesce((
    SELECT ARRAY(SELECT jsonb_array_elements_text(coalesce(version.content -> 'variants', '[]'::jsonb)))
    FROM protocol_version AS version
    WHERE version.study_id = wanted AND version.hash IS NOT NULL
    ORDER BY version.number DESC LIMIT 1
  ), '{}')
$$;
--> statement-breakpoint
CREATE FUNCTION roles_clash(one text, other text, variants text[]) RETURNS boolean LANGUAGE sql IMMUTABLE AS $$
  SELECT
    (one IN ('approver', 'unblinded-statistician') AND other IN ('coordinator', 'operator', 'statistician'))
    OR (one = 'investigator' AND other IN ('approver', 'unblinded-statistician') AND NOT 'open-investigator' = ANY (variants))
    OR (one = 'investigator' AND other IN ('coordinator', 'operator', 'statistician') AND 'open-investigator' = ANY (variants))
    OR (one = 'approver' AND other = 'unblinded-statistician' AND NOT 'small-team' = ANY (variants))
$$;
--> statement-breakpoint
-- A role that was taken back before its second person confirmed it never let anybody see arms.
CREATE FUNCTION role_ever_counted(held study_role) RETURNS boolean LANGUAGE sql IMMUTABLE AS $$
  SELECT held.ended_at IS NULL OR held.confirmed_at IS NOT NULL OR held.role NOT IN ('approver', 'unblinded-statistician')
$$;
--> statement-breakpoint
CREATE OR REPLACE FUNCTION refuse_forbidden_roles() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE variants text[];
BEGIN
  IF TG_OP = 'UPDATE' AND NEW.ended_at IS NOT NULL THEN RETURN NEW; END IF;
  PERFORM pg_advisory_xact_lock(hashtext('study_role:' || NEW.study_id::text));
  variants := study_variants(NEW.study_id);
  IF EXISTS (
    SELECT 1 FROM study_role AS held
    WHERE held.study_id = NEW.study_id AND held.person_id = NEW.person_id AND held.id <> NEW.id AND role_ever_counted(held)
      AND (roles_clash(NEW.role, held.role, variants) OR roles_clash(held.role, NEW.role, variants))
  ) THEN
    RAISE EXCEPTION 'these two roles would break blinding' USING ERRCODE = '23514', CONSTRAINT = 'study_role_forbidden_pair';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
-- Freezing a version whose variants forbid what somebody of the team holds or held is refused.
CREATE FUNCTION refuse_freeze_over_roles() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE variants text[];
BEGIN
  PERFORM pg_advisory_xact_lock(hashtext('study_role:' || NEW.study_id::text));
  variants := ARRAY(SELECT jsonb_array_elements_text(coalesce(NEW.content -> 'variants', '[]'::jsonb)));
  IF EXISTS (
    SELECT 1 FROM study_role AS held JOIN study_role AS other
      ON other.study_id = held.study_id AND other.person_id = held.person_id AND other.id <> held.id
    WHERE held.study_id = NEW.study_id AND role_ever_counted(held) AND role_ever_counted(other)
      AND roles_clash(held.role, other.role, variants)
  ) THEN
    RAISE EXCEPTION 'the team holds roles that this version forbids' USING ERRCODE = '23514', CONSTRAINT = 'protocol_version_team';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER protocol_version_team BEFORE UPDATE ON protocol_version FOR EACH ROW
  WHEN (OLD.hash IS NULL AND NEW.hash IS NOT NULL) EXECUTE FUNCTION refuse_freeze_over_roles();
--> statement-breakpoint
-- Who holds which role in which study is never rewritten, only given again, confirmed and ended.
REVOKE UPDATE ON study_role FROM ovalry_app;
--> statement-breakpoint
GRANT UPDATE (given_by, given_at, confirmed_by, confirmed_at, ended_at) ON study_role TO ovalry_app;
--> statement-breakpoint
-- Sign-in compares addresses without case; what is stored is lower case.
ALTER TABLE person ADD CONSTRAINT person_email_lower CHECK (email = lower(email));
