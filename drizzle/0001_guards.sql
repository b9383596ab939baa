-- What must never happen, guarded by the database itself. The roles ovalry_app and ovalry_research
-- exist before this runs (src/worker/migrate.ts makes them).
CREATE EXTENSION IF NOT EXISTS btree_gist;
--> statement-breakpoint
ALTER TABLE booking
  ADD CONSTRAINT booking_during_valid CHECK (NOT isempty(during) AND lower_inc(during) AND NOT upper_inc(during)),
  ADD CONSTRAINT booking_during_inside CHECK (during <@ occupied),
  ADD CONSTRAINT booking_no_rig_clash EXCLUDE USING gist (rig_id WITH =, occupied WITH &&)
    WHERE (state IN ('booked', 'attended')) DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT booking_no_room_clash EXCLUDE USING gist (room_id WITH =, occupied WITH &&)
    WHERE (state IN ('booked', 'attended')) DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT booking_no_staff_clash EXCLUDE USING gist (staff_id WITH =, occupied WITH &&)
    WHERE (state IN ('booked', 'attended')) DEFERRABLE INITIALLY DEFERRED,
  ADD CONSTRAINT booking_no_person_clash EXCLUDE USING gist (participant_id WITH =, during WITH &&)
    WHERE (state IN ('booked', 'attended')) DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
CREATE UNIQUE INDEX booking_visit_once ON booking (participant_id, visit_number) WHERE state IN ('booked', 'attended');
--> statement-breakpoint
CREATE UNIQUE INDEX outbox_once ON outbox (booking_id, participant_id, kind, sequence) WHERE booking_id IS NOT NULL;
--> statement-breakpoint
ALTER TABLE weekly_hours
  ADD CONSTRAINT weekly_hours_weekday CHECK (weekday BETWEEN 1 AND 7),
  ADD CONSTRAINT weekly_hours_order CHECK (opens_minute >= 0 AND opens_minute < closes_minute AND closes_minute <= 1440),
  ADD CONSTRAINT weekly_hours_owner CHECK (num_nonnulls(rig_id, staff_id) = 1);
--> statement-breakpoint
ALTER TABLE study_role ADD CONSTRAINT study_role_two_people CHECK (
  given_by <> person_id OR role NOT IN ('approver', 'unblinded-statistician', 'monitor')
), ADD CONSTRAINT study_role_confirmed_by_another CHECK (confirmed_by IS NULL OR (confirmed_by <> given_by AND confirmed_by <> person_id));
--> statement-breakpoint
ALTER TABLE study_pause ADD CONSTRAINT study_pause_two_people CHECK (
  (second_lift_by IS NULL OR (first_lift_by IS NOT NULL AND second_lift_by <> first_lift_by))
  AND (lifted_at IS NULL) = (second_lift_by IS NULL)
);
--> statement-breakpoint
ALTER TABLE protocol_version ADD CONSTRAINT protocol_version_frozen CHECK ((hash IS NULL) = (frozen_at IS NULL));
--> statement-breakpoint
ALTER TABLE ethics_approval ADD CONSTRAINT ethics_approval_dates CHECK (expires_on > approved_on);
--> statement-breakpoint
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'rows of % are never changed or removed', TG_TABLE_NAME USING ERRCODE = '42501';
END $$;
--> statement-breakpoint
CREATE TRIGGER record_event_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON record_event EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER upload_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON upload EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER block_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON block EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER trial_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON trial EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER allocation_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON allocation EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER allocation_seal_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON allocation_seal EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER settlement_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON settlement EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER consent_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON consent EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER sign_off_fixed BEFORE UPDATE OR DELETE OR TRUNCATE ON sign_off EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE FUNCTION refuse_frozen_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF OLD.hash IS NOT NULL THEN
    RAISE EXCEPTION 'protocol version % is frozen', OLD.number USING ERRCODE = '42501';
  END IF;
  IF TG_OP = 'DELETE' THEN RETURN OLD; END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER protocol_version_fixed BEFORE UPDATE OR DELETE ON protocol_version FOR EACH ROW EXECUTE FUNCTION refuse_frozen_change();
--> statement-breakpoint
CREATE FUNCTION refuse_decision_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' OR OLD.inputs <> NEW.inputs OR OLD.output <> NEW.output OR OLD.inputs_digest <> NEW.inputs_digest
     OR OLD.protocol_hash <> NEW.protocol_hash OR OLD.policy_hash <> NEW.policy_hash OR OLD.kind <> NEW.kind
     OR OLD.participant_id <> NEW.participant_id OR OLD.visit_number <> NEW.visit_number OR OLD.block_number <> NEW.block_number THEN
    RAISE EXCEPTION 'a decision is never rewritten' USING ERRCODE = '42501';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER decision_fixed BEFORE UPDATE OR DELETE ON decision FOR EACH ROW EXECUTE FUNCTION refuse_decision_change();
--> statement-breakpoint
-- Roles that see arms and roles that run or score never meet in one person and study, now or earlier.
CREATE FUNCTION refuse_forbidden_roles() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_advisory_xact_lock(hashtext('study_role:' || NEW.study_id::text || NEW.person_id::text));
  IF EXISTS (
    SELECT 1 FROM study_role AS other
    WHERE other.study_id = NEW.study_id AND other.person_id = NEW.person_id AND other.id <> NEW.id
      AND ((NEW.role IN ('approver', 'unblinded-statistician') AND other.role IN ('coordinator', 'operator', 'statistician'))
        OR (other.role IN ('approver', 'unblinded-statistician') AND NEW.role IN ('coordinator', 'operator', 'statistician')))
  ) THEN
    RAISE EXCEPTION 'these two roles would break blinding' USING ERRCODE = '23514', CONSTRAINT = 'study_role_forbidden_pair';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER study_role_pairs BEFORE INSERT OR UPDATE ON study_role FOR EACH ROW EXECUTE FUNCTION refuse_forbidden_roles();
--> statement-breakpoint
-- The record's hash chain: each hash covers the previous one; sequence numbers have no gaps.
CREATE FUNCTION chain_record_event() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE last record;
BEGIN
  PERFORM pg_advisory_xact_lock(hashtext('record_event'));
  SELECT seq, hash INTO last FROM record_event ORDER BY seq DESC LIMIT 1;
  NEW.seq := coalesce(last.seq, 0) + 1;
  NEW.previous_hash := coalesce(last.hash, '');
  NEW.hash := encode(sha256(convert_to(concat_ws(E'\n',
    NEW.previous_hash, NEW.seq::text,
    to_char(NEW.at AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
    coalesce(NEW.lab_id::text, ''), coalesce(NEW.study_id::text, ''), coalesce(NEW.participant_id::text, ''),
    coalesce(NEW.actor_id::text, ''), NEW.actor_kind, NEW.kind, NEW.item, NEW.body), 'UTF8')), 'hex');
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER record_event_chain BEFORE INSERT ON record_event FOR EACH ROW EXECUTE FUNCTION chain_record_event();
--> statement-breakpoint
-- The application's role: owns nothing; no update or delete where history must stay.
GRANT USAGE ON SCHEMA public TO ovalry_app, ovalry_research;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON account, answer_link, booking, contact, holiday, instance, lab, membership,
  outbox, participant, person, rig, room, session, setup_link, staff, study, study_pause, task, verification_token, weekly_hours TO ovalry_app;
--> statement-breakpoint
GRANT SELECT, INSERT ON allocation, allocation_seal, block, consent, record_event, settlement, sign_off, trial, upload TO ovalry_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE ON protocol_version, study_role TO ovalry_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (state, ready_at) ON decision TO ovalry_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE (revoked_at) ON bundle, ethics_approval TO ovalry_app;
--> statement-breakpoint
REVOKE DELETE ON booking, participant, study, study_pause, instance FROM ovalry_app;
--> statement-breakpoint
-- Research queries: codes, visits, blocks and trials; neither contact data, accounts, arms nor decisions.
GRANT SELECT ON study, protocol_version, participant, block, trial TO ovalry_research;
--> statement-breakpoint
GRANT SELECT (id, study_id, participant_id, visit_number, during, state) ON booking TO ovalry_research;
