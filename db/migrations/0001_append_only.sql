-- Clinical rows are added, never changed or removed (law L12, decision D9). The one trigger below refuses every UPDATE and
-- DELETE, but for the columns that stand in its arguments:
--   'name'   may go from null to a value, once
--   '+name'  may only grow
--   '~name'  may change while the row is open (closed_at is null)
-- A row whose closed_at is set never changes again.
CREATE FUNCTION append_only() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  before jsonb;
  after jsonb;
  changed text;
BEGIN
  IF TG_OP <> 'UPDATE' THEN
    RAISE EXCEPTION 'rows of % are never removed', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
  END IF;
  IF TG_NARGS = 0 THEN
    RAISE EXCEPTION 'rows of % never change', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
  END IF;
  before := to_jsonb(OLD);
  after := to_jsonb(NEW);
  FOR changed IN SELECT key FROM jsonb_each(after) WHERE value IS DISTINCT FROM before -> key LOOP
    IF before ->> 'closed_at' IS NOT NULL THEN
      RAISE EXCEPTION 'this row of % is closed: % cannot change', TG_TABLE_NAME, changed USING ERRCODE = 'restrict_violation';
    ELSIF changed = ANY (TG_ARGV) AND before ->> changed IS NULL THEN
      CONTINUE;
    ELSIF ('+' || changed) = ANY (TG_ARGV) AND (after ->> changed)::numeric > (before ->> changed)::numeric THEN
      CONTINUE;
    ELSIF ('~' || changed) = ANY (TG_ARGV) THEN
      CONTINUE;
    END IF;
    RAISE EXCEPTION 'column % of % cannot change so', changed, TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
  END LOOP;
  RETURN NEW;
END
$$;
--> statement-breakpoint
-- Ties a table to the trigger, and takes the right to remove rows from the role that owns it.
CREATE FUNCTION make_append_only(target regclass, VARIADIC changeable text[]) RETURNS void LANGUAGE plpgsql AS $$
DECLARE
  arguments text := (SELECT string_agg(quote_literal(c), ', ') FROM unnest(changeable) AS c WHERE c <> '');
BEGIN
  EXECUTE format('CREATE TRIGGER append_only BEFORE UPDATE OR DELETE ON %s FOR EACH ROW EXECUTE FUNCTION append_only(%s)', target, coalesce(arguments, ''));
  EXECUTE format('CREATE TRIGGER never_emptied BEFORE TRUNCATE ON %s FOR EACH STATEMENT EXECUTE FUNCTION append_only()', target);
  EXECUTE format('REVOKE DELETE, TRUNCATE ON %s FROM CURRENT_USER', target);
END
$$;
--> statement-breakpoint
SELECT make_append_only(name::regclass, '') FROM unnest(ARRAY[
  'protocol', 'screening', 'training', 'watched_session', 'message', 'caregiver_share', 'caregiver_code', 'device_state',
  'signature', 'acknowledgement', 'precheck', 'session_event', 'diary', 'photo', 'worklist_claim', 'review', 'audit_entry'
]) AS name;
--> statement-breakpoint
SELECT make_append_only(name::regclass, 'closed_at', 'closed_why') FROM unnest(ARRAY[
  'permit', 'lockout', 'consent', 'invitation', 'planned_session', 'device_assignment', 'supply', 'course', 'course_pause', 'signing_key'
]) AS name;
--> statement-breakpoint
SELECT make_append_only('participant', 'account_id', 'closed_at', 'closed_why');
--> statement-breakpoint
SELECT make_append_only('caregiver', 'account_id', 'accepted_at', 'mails_stopped_at', 'closed_at', 'closed_why');
--> statement-breakpoint
SELECT make_append_only('prescription', 'version', 'signed_at', 'closed_at', 'closed_why');
--> statement-breakpoint
SELECT make_append_only('session', 'started_at', 'ended_at', 'end_reason', 'delivered_uc', 'upper_uc', 'on_ms', 'fraction_permille', 'completeness', 'summary', 'closed_at', 'closed_why');
--> statement-breakpoint
SELECT make_append_only('worklist_item', '~escalate_at', '~escalation', 'closed_at', 'closed_why');
--> statement-breakpoint
SELECT make_append_only('device', '+last_counter');
--> statement-breakpoint
SELECT make_append_only('audit_head', '+sequence', '~hash', '~previous_hash');
--> statement-breakpoint
DROP FUNCTION make_append_only(regclass, text[]);
--> statement-breakpoint
-- The counters of too many requests (server/http/limits.ts); the library knows this shape.
CREATE TABLE rate_limit (key varchar(255) PRIMARY KEY, points integer NOT NULL DEFAULT 0, expire bigint);
