-- A version that is stored frozen is judged like one that is frozen later.
CREATE TRIGGER protocol_version_team_stored BEFORE INSERT ON protocol_version FOR EACH ROW
  WHEN (NEW.hash IS NOT NULL) EXECUTE FUNCTION refuse_freeze_over_roles();
