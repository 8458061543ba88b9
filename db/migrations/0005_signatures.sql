-- A signature says when the password was given for it. Those that are there were made in the request that checked it.
ALTER TABLE "signature" ADD COLUMN "confirmed_at" timestamp (3) with time zone;--> statement-breakpoint
ALTER TABLE "signature" NO FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "signature" DISABLE TRIGGER USER;--> statement-breakpoint
UPDATE "signature" SET "confirmed_at" = "created_at";--> statement-breakpoint
ALTER TABLE "signature" ENABLE TRIGGER USER;--> statement-breakpoint
ALTER TABLE "signature" FORCE ROW LEVEL SECURITY;--> statement-breakpoint
ALTER TABLE "signature" ALTER COLUMN "confirmed_at" SET NOT NULL;--> statement-breakpoint
ALTER TABLE "signature" ADD CONSTRAINT "signature_confirmed" CHECK ("signature"."confirmed_at" between "signature"."created_at" - interval '5 minutes' and "signature"."created_at");
--> statement-breakpoint
-- A signature is on something that is there, and on its bytes as they are.
CREATE FUNCTION guard_signature() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  signed text := CASE NEW.subject_kind
    WHEN 'prescription' THEN (SELECT content_hash FROM prescription WHERE id = NEW.subject_id)
    WHEN 'review' THEN (SELECT content_hash FROM review WHERE id = NEW.subject_id)
    ELSE (SELECT content_hash FROM protocol WHERE id = NEW.subject_id)
  END;
BEGIN
  IF signed IS DISTINCT FROM NEW.content_hash THEN
    RAISE EXCEPTION 'a signature is on the content as it stands' USING ERRCODE = 'check_violation', CONSTRAINT = 'signature_content';
  END IF;
  RETURN NEW;
END
$$;
--> statement-breakpoint
CREATE TRIGGER guarded BEFORE INSERT ON signature FOR EACH ROW EXECUTE FUNCTION guard_signature();
