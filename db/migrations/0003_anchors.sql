CREATE TABLE "audit_anchor" (
	"number" integer PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"day" date NOT NULL,
	"previous_hash" text NOT NULL,
	"hash" text NOT NULL,
	"kid" text NOT NULL,
	"token" text NOT NULL,
	CONSTRAINT "audit_anchor_day_unique" UNIQUE("day")
);
--> statement-breakpoint
CREATE TABLE "audit_anchor_head" (
	"chain" text NOT NULL,
	"sequence" bigint NOT NULL,
	"hash" text NOT NULL,
	"anchor" integer NOT NULL,
	CONSTRAINT "audit_anchor_head_chain_sequence_pk" PRIMARY KEY("chain","sequence")
);
--> statement-breakpoint
ALTER TABLE "audit_anchor_head" ADD CONSTRAINT "audit_anchor_head_anchor_audit_anchor_number_fk" FOREIGN KEY ("anchor") REFERENCES "public"."audit_anchor"("number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_anchor_head_anchor" ON "audit_anchor_head" USING btree ("anchor");--> statement-breakpoint
-- An anchor never changes and never goes.
CREATE TRIGGER append_only BEFORE UPDATE OR DELETE ON audit_anchor FOR EACH ROW EXECUTE FUNCTION append_only();
--> statement-breakpoint
CREATE TRIGGER never_emptied BEFORE TRUNCATE ON audit_anchor FOR EACH STATEMENT EXECUTE FUNCTION append_only();
--> statement-breakpoint
CREATE TRIGGER append_only BEFORE UPDATE OR DELETE ON audit_anchor_head FOR EACH ROW EXECUTE FUNCTION append_only();
--> statement-breakpoint
CREATE TRIGGER never_emptied BEFORE TRUNCATE ON audit_anchor_head FOR EACH STATEMENT EXECUTE FUNCTION append_only();
--> statement-breakpoint
REVOKE DELETE, TRUNCATE ON audit_anchor, audit_anchor_head FROM CURRENT_USER;
