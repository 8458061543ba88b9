-- What the database refuses by itself beyond 0000 and 0001: the compiled-in ceilings that need more than one column, a permit that says
-- anything but what the prescription in force says, and a dose on top of what the last 24 h and 7 days already hold. The numbers are
-- those of shared/rules/ceilings.ts; tests/api/database-guard.test.ts tries each just below, at and just above. Where a rule needs facts
-- that a row has not (time zone, outcome of a stopped run), the database takes the milder reading: it is the last guard, not the first.
CREATE FUNCTION worst_density(intensity_ua integer, electrodes jsonb) RETURNS numeric LANGUAGE sql IMMUTABLE STRICT AS $$
  SELECT CASE WHEN jsonb_typeof(electrodes) = 'array' AND jsonb_array_length(electrodes) >= 2
    THEN (SELECT CASE WHEN bool_and((e ->> 'areaSquareCentimetre')::numeric > 0 AND (e ->> 'share')::numeric >= 0)
        THEN max(intensity_ua * (e ->> 'share')::numeric / 1000 / nullif((e ->> 'areaSquareCentimetre')::numeric, 0)) END
      FROM jsonb_array_elements(electrodes) AS e)
  END
$$;
--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_day_ceiling" CHECK ("prescription"."max_per_day" >= 1 and "prescription"."max_per_day"::bigint * "prescription"."on_ms" <= 3600000);--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_gap_floor" CHECK ("prescription"."min_gap_ms" >= 14400000);--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_density_ceiling" CHECK (coalesce(worst_density("prescription"."intensity_ua", "prescription"."electrodes") <= 0.16 * 1.000000001, false));--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_whole_time" CHECK ("prescription"."on_ms" = "prescription"."ramp_up_ms" + "prescription"."hold_ms" + "prescription"."ramp_down_ms");--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_whole_charge" CHECK ("prescription"."waveform" <> 'tDCS' or "prescription"."charge_uc" * 2000 >= "prescription"."intensity_ua"::bigint * (2 * "prescription"."hold_ms"::bigint + "prescription"."ramp_up_ms" + "prescription"."ramp_down_ms"));
--> statement-breakpoint
-- Under 12 years never, under 18 no more than 2 mA. A day is added for zones east of the server's.
CREATE FUNCTION guard_age(person uuid, intensity_ua integer, at timestamptz) RETURNS void LANGUAGE plpgsql AS $$
DECLARE
  born date := (SELECT born_on FROM participant WHERE id = person);
  years integer := extract(year FROM age((at AT TIME ZONE 'UTC')::date + 1, born));
BEGIN
  IF born IS NULL OR years < 12 THEN
    RAISE EXCEPTION 'no stimulation under 12 years of age' USING ERRCODE = 'check_violation', CONSTRAINT = 'age_floor';
  ELSIF years < 18 AND intensity_ua > 2000 THEN
    RAISE EXCEPTION 'above 2 mA under 18 years of age' USING ERRCODE = 'check_violation', CONSTRAINT = 'minor_intensity_ceiling';
  END IF;
END
$$;
--> statement-breakpoint
CREATE FUNCTION guard_prescription() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM guard_age(NEW.participant_id, NEW.intensity_ua, NEW.created_at);
  IF NEW.version IS NOT NULL THEN
    RAISE EXCEPTION 'a prescription begins as a draft' USING ERRCODE = 'check_violation', CONSTRAINT = 'prescription_draft_first';
  END IF;
  RETURN NEW;
END
$$;
--> statement-breakpoint
CREATE TRIGGER guarded BEFORE INSERT ON prescription FOR EACH ROW EXECUTE FUNCTION guard_prescription();
--> statement-breakpoint
-- In force means signed: by one clinician, or by two where the tier asks for two, over the content as it stands.
CREATE FUNCTION guard_signing() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  signers integer;
BEGIN
  IF NEW.signed_at IS NULL OR OLD.signed_at IS NOT NULL THEN
    RETURN NEW;
  END IF;
  SELECT count(DISTINCT account_id) INTO signers FROM signature
    WHERE subject_id = NEW.id AND subject_kind = 'prescription' AND content_hash = NEW.content_hash;
  IF signers < (CASE NEW.tier WHEN 'accept' THEN 1 ELSE 2 END) THEN
    RAISE EXCEPTION 'a signature is missing' USING ERRCODE = 'check_violation', CONSTRAINT = 'prescription_signatures';
  END IF;
  RETURN NEW;
END
$$;
--> statement-breakpoint
CREATE TRIGGER guarded_signing BEFORE UPDATE ON prescription FOR EACH ROW EXECUTE FUNCTION guard_signing();
--> statement-breakpoint
CREATE FUNCTION guard_permit() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  prescribed prescription;
  day_uc bigint;
  week_uc bigint;
  day_ms bigint;
BEGIN
  PERFORM guard_age(NEW.participant_id, NEW.intensity_ua, NEW.issued_at);
  IF NEW.closed_at IS NOT NULL THEN
    RAISE EXCEPTION 'a permit begins live' USING ERRCODE = 'check_violation', CONSTRAINT = 'permit_live_first';
  END IF;
  SELECT * INTO prescribed FROM prescription WHERE id = NEW.prescription_id;
  IF prescribed.signed_at IS NULL OR prescribed.closed_at IS NOT NULL
    OR (prescribed.participant_id, prescribed.course_id) IS DISTINCT FROM (NEW.participant_id, NEW.course_id)
    OR (prescribed.intensity_ua, prescribed.charge_uc, prescribed.on_ms) IS DISTINCT FROM (NEW.intensity_ua, NEW.charge_uc, NEW.on_ms) THEN
    RAISE EXCEPTION 'a permit gives the dose of the prescription in force' USING ERRCODE = 'check_violation', CONSTRAINT = 'permit_as_prescribed';
  END IF;
  -- What ended exactly 24 h ago is out. Reserved doses count whole until a record proves less; a permit voided before its start counts nothing.
  SELECT coalesce(sum(uc) FILTER (WHERE ended > NEW.issued_at - interval '24 hours'), 0),
         coalesce(sum(ms) FILTER (WHERE ended > NEW.issued_at - interval '24 hours'), 0),
         coalesce(sum(uc), 0)
    INTO day_uc, day_ms, week_uc
    FROM (
      SELECT coalesce(s.ended_at, s.created_at) AS ended,
        CASE WHEN s.closed_at IS NULL THEN p.charge_uc ELSE coalesce(s.upper_uc, 0) END AS uc,
        CASE WHEN s.closed_at IS NULL THEN p.on_ms ELSE coalesce(s.on_ms, 0) END AS ms
      FROM session s JOIN permit p ON p.id = s.permit_id
      WHERE s.participant_id = NEW.participant_id
        AND s.created_at > NEW.issued_at - interval '9 days'
        AND coalesce(s.ended_at, s.created_at) > NEW.issued_at - interval '7 days'
        AND (s.closed_at IS NOT NULL OR s.started_at IS NOT NULL OR p.closed_at IS NULL OR p.closed_why IN ('used', 'expired'))
    ) AS counted;
  IF day_uc + NEW.charge_uc > 14400000 THEN
    RAISE EXCEPTION 'above 14.4 C in 24 h' USING ERRCODE = 'check_violation', CONSTRAINT = 'permit_charge_24h_ceiling';
  ELSIF week_uc + NEW.charge_uc > 50400000 THEN
    RAISE EXCEPTION 'above 50.4 C in 7 days' USING ERRCODE = 'check_violation', CONSTRAINT = 'permit_charge_7d_ceiling';
  ELSIF day_ms + NEW.on_ms > 3600000 THEN
    RAISE EXCEPTION 'above 60 min in 24 h' USING ERRCODE = 'check_violation', CONSTRAINT = 'permit_minutes_24h_ceiling';
  END IF;
  RETURN NEW;
END
$$;
--> statement-breakpoint
CREATE TRIGGER guarded BEFORE INSERT ON permit FOR EACH ROW EXECUTE FUNCTION guard_permit();
