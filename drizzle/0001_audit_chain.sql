-- The audit log: numbered without gaps, each entry hashed together with the one before, never changed.
-- hash = SHA-256 of prev_hash, a line feed, and the JSON array of the entry's columns in this order.
CREATE FUNCTION audit_log_chain() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  last record;
BEGIN
  -- One writer at a time: the chain has one head. Held until the transaction ends.
  PERFORM pg_advisory_xact_lock(7020981);
  SELECT seq, hash INTO last FROM audit_log ORDER BY seq DESC LIMIT 1;
  NEW.seq := coalesce(last.seq, 0) + 1;
  NEW.at := clock_timestamp();
  NEW.prev_hash := coalesce(last.hash, repeat('0', 64));
  NEW.hash := encode(sha256(convert_to(NEW.prev_hash || E'\n' || jsonb_build_array(
    NEW.seq, to_char(NEW.at AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'), NEW.actor_id, NEW.actor_name, NEW.via, NEW.action,
    NEW.object_type, NEW.object_id, NEW.label, NEW.campaign_id, NEW.before, NEW.after, NEW.reason, NEW.request_id)::text, 'UTF8')), 'hex');
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER audit_log_chain BEFORE INSERT ON audit_log FOR EACH ROW EXECUTE FUNCTION audit_log_chain();
--> statement-breakpoint
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% on % is refused: its rows are never changed or removed', TG_OP, TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;
--> statement-breakpoint
CREATE TRIGGER audit_log_fixed BEFORE UPDATE OR DELETE ON audit_log FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_log_kept BEFORE TRUNCATE ON audit_log FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- An archive's bytes are never altered or swapped.
CREATE TRIGGER archive_file_fixed BEFORE UPDATE OR DELETE ON archive_file FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER stored_object_fixed BEFORE UPDATE OR DELETE ON stored_object FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- A release never changes once it is out: only its state (superseded, withdrawn) and the withdrawal's own columns may.
CREATE FUNCTION release_fixed() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'DELETE on release is refused: releases are withdrawn, never removed' USING ERRCODE = 'restrict_violation';
  END IF;
  IF (to_jsonb(NEW) - ARRAY['state', 'withdrawn_at', 'withdrawn_by', 'withdrawn_reason'])
       IS DISTINCT FROM (to_jsonb(OLD) - ARRAY['state', 'withdrawn_at', 'withdrawn_by', 'withdrawn_reason']) THEN
    RAISE EXCEPTION 'UPDATE on release % is refused: a release never changes', OLD.id USING ERRCODE = 'restrict_violation';
  END IF;
  IF OLD.state = 'withdrawn' AND NEW.state <> 'withdrawn' THEN
    RAISE EXCEPTION 'UPDATE on release % is refused: a withdrawal is final', OLD.id USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER release_fixed BEFORE UPDATE OR DELETE ON release FOR EACH ROW EXECUTE FUNCTION release_fixed();
