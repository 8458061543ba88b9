CREATE TABLE "account" (
	"id" text PRIMARY KEY NOT NULL,
	"role" text NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"language" text DEFAULT 'en' NOT NULL,
	"state" text DEFAULT 'active' NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "account_role" CHECK (role in ('participant', 'caregiver', 'coordinator', 'clinician', 'monitor', 'administrator')),
	CONSTRAINT "account_state" CHECK (state in ('active', 'suspended', 'closed'))
);
--> statement-breakpoint
CREATE TABLE "auth_credential" (
	"id" text PRIMARY KEY NOT NULL,
	"account_id" text NOT NULL,
	"provider_id" text NOT NULL,
	"user_id" text NOT NULL,
	"access_token" text,
	"refresh_token" text,
	"id_token" text,
	"access_token_expires_at" timestamp with time zone,
	"refresh_token_expires_at" timestamp with time zone,
	"scope" text,
	"password" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "auth_session" (
	"id" text PRIMARY KEY NOT NULL,
	"token" text NOT NULL,
	"user_id" text NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"ip_address" text,
	"user_agent" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "auth_session_token_unique" UNIQUE("token")
);
--> statement-breakpoint
CREATE TABLE "auth_two_factor" (
	"id" text PRIMARY KEY NOT NULL,
	"secret" text NOT NULL,
	"backup_codes" text NOT NULL,
	"user_id" text NOT NULL,
	"verified" boolean DEFAULT true NOT NULL,
	"failed_verification_count" integer DEFAULT 0 NOT NULL,
	"locked_until" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "auth_user" (
	"id" text PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"email_verified" boolean DEFAULT false NOT NULL,
	"image" text,
	"two_factor_enabled" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "auth_user_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "auth_verification" (
	"id" text PRIMARY KEY NOT NULL,
	"identifier" text NOT NULL,
	"value" text NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "invitation" (
	"id" uuid PRIMARY KEY NOT NULL,
	"role" text NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"site_id" uuid NOT NULL,
	"subject_id" uuid,
	"token_hash" text NOT NULL,
	"invited_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "invitation_token_hash_unique" UNIQUE("token_hash")
);
--> statement-breakpoint
CREATE TABLE "membership" (
	"account_id" text NOT NULL,
	"site_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "membership_account_id_site_id_pk" PRIMARY KEY("account_id","site_id")
);
--> statement-breakpoint
CREATE TABLE "acknowledgement" (
	"prescription_id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "course" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text
);
--> statement-breakpoint
CREATE TABLE "course_pause" (
	"id" uuid PRIMARY KEY NOT NULL,
	"course_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text
);
--> statement-breakpoint
CREATE TABLE "planned_session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"course_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"prescription_id" uuid NOT NULL,
	"window_from" timestamp (3) with time zone NOT NULL,
	"window_to" timestamp (3) with time zone NOT NULL,
	"replaces_id" uuid,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "planned_session_window" CHECK ("planned_session"."window_to" > "planned_session"."window_from"),
	CONSTRAINT "planned_session_closed_why" CHECK (closed_why is null or closed_why in ('done', 'missed', 'excused', 'cancelled', 'moved'))
);
--> statement-breakpoint
CREATE TABLE "prescription" (
	"id" uuid PRIMARY KEY NOT NULL,
	"course_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"waveform" text NOT NULL,
	"intensity_ua" integer NOT NULL,
	"ramp_up_ms" integer NOT NULL,
	"hold_ms" integer NOT NULL,
	"ramp_down_ms" integer NOT NULL,
	"charge_uc" bigint NOT NULL,
	"on_ms" integer NOT NULL,
	"electrodes" jsonb NOT NULL,
	"starts_on" date NOT NULL,
	"days" integer[] NOT NULL,
	"hours_from" text NOT NULL,
	"hours_to" text NOT NULL,
	"sessions_total" integer NOT NULL,
	"min_gap_ms" bigint NOT NULL,
	"max_per_day" integer NOT NULL,
	"max_per_7_days" integer NOT NULL,
	"expires_on" date NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"make_up_missed" boolean NOT NULL,
	"assisted" boolean NOT NULL,
	"tier" text NOT NULL,
	"reason" text,
	"amends_id" uuid,
	"content_hash" text NOT NULL,
	"written_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"version" integer,
	"signed_at" timestamp (3) with time zone,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "prescription_intensity_ceiling" CHECK ("prescription"."intensity_ua" > 0 and "prescription"."intensity_ua" <= 4000),
	CONSTRAINT "prescription_minutes_ceiling" CHECK ("prescription"."on_ms" > 0 and "prescription"."on_ms" <= 2400000),
	CONSTRAINT "prescription_charge_ceiling" CHECK ("prescription"."charge_uc" > 0 and "prescription"."charge_uc" <= 7200000),
	CONSTRAINT "prescription_ramp_up_bounds" CHECK ("prescription"."ramp_up_ms" between 10000 and 120000),
	CONSTRAINT "prescription_ramp_down_bounds" CHECK ("prescription"."ramp_down_ms" between 10000 and 120000),
	CONSTRAINT "prescription_hold" CHECK ("prescription"."hold_ms" >= 0),
	CONSTRAINT "prescription_sessions" CHECK ("prescription"."sessions_total" between 1 and 200),
	CONSTRAINT "prescription_signed_has_version" CHECK (("prescription"."signed_at" is null) = ("prescription"."version" is null)),
	CONSTRAINT "prescription_waveform" CHECK (waveform in ('tDCS'))
);
--> statement-breakpoint
CREATE TABLE "signature" (
	"id" uuid PRIMARY KEY NOT NULL,
	"subject_kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"account_id" text NOT NULL,
	"name" text NOT NULL,
	"role" text NOT NULL,
	"meaning" text NOT NULL,
	"content_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "device" (
	"id" uuid PRIMARY KEY NOT NULL,
	"site_id" uuid NOT NULL,
	"label" text NOT NULL,
	"model" text NOT NULL,
	"serial" text NOT NULL,
	"firmware" text NOT NULL,
	"calibration_due_on" date NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"last_counter" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "device_serial_unique" UNIQUE("serial")
);
--> statement-breakpoint
CREATE TABLE "device_assignment" (
	"id" uuid PRIMARY KEY NOT NULL,
	"device_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text
);
--> statement-breakpoint
CREATE TABLE "device_state" (
	"id" uuid PRIMARY KEY NOT NULL,
	"device_id" uuid NOT NULL,
	"state" text NOT NULL,
	"reason" text,
	"by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"number" integer NOT NULL,
	CONSTRAINT "device_state_known" CHECK (state in ('stock', 'out', 'quarantined', 'recalled', 'lost', 'retired'))
);
--> statement-breakpoint
CREATE TABLE "supply" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"lot" text NOT NULL,
	"opened_at" timestamp (3) with time zone NOT NULL,
	"max_uses" integer,
	"max_days" integer NOT NULL,
	"by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "supply_kind" CHECK (kind in ('sponge', 'saline', 'insert'))
);
--> statement-breakpoint
CREATE TABLE "audit_entry" (
	"chain" text NOT NULL,
	"sequence" bigint NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"actor_id" text,
	"actor_name" text NOT NULL,
	"actor_role" text NOT NULL,
	"action" text NOT NULL,
	"kind" text NOT NULL,
	"site_id" uuid,
	"participant_id" uuid,
	"subject_kind" text,
	"subject_id" text,
	"before" jsonb,
	"after" jsonb,
	"why" text,
	"request_id" text,
	"previous_hash" text NOT NULL,
	"hash" text NOT NULL,
	CONSTRAINT "audit_entry_chain_sequence_pk" PRIMARY KEY("chain","sequence")
);
--> statement-breakpoint
CREATE TABLE "audit_head" (
	"chain" text PRIMARY KEY NOT NULL,
	"sequence" bigint NOT NULL,
	"previous_hash" text NOT NULL,
	"hash" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "demo_clock" (
	"id" integer PRIMARY KEY NOT NULL,
	"offset_seconds" bigint NOT NULL
);
--> statement-breakpoint
CREATE TABLE "demo_mail" (
	"id" uuid PRIMARY KEY NOT NULL,
	"to_email" text NOT NULL,
	"subject" text NOT NULL,
	"text" text NOT NULL,
	"html" text NOT NULL,
	"sent_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "demo_progress" (
	"step" text PRIMARY KEY NOT NULL,
	"facts" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "heartbeat" (
	"name" text PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "key_seen" (
	"account_id" text NOT NULL,
	"key" text NOT NULL,
	"contract" text NOT NULL,
	"body_hash" text NOT NULL,
	"status" integer NOT NULL,
	"answer" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "key_seen_account_id_key_pk" PRIMARY KEY("account_id","key")
);
--> statement-breakpoint
CREATE TABLE "outbox" (
	"id" uuid PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"facts" jsonb NOT NULL,
	"to_email" text NOT NULL,
	"language" text NOT NULL,
	"key" text NOT NULL,
	"urgent" boolean NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"due_at" timestamp (3) with time zone NOT NULL,
	"drop_at" timestamp (3) with time zone,
	"attempts" integer DEFAULT 0 NOT NULL,
	"last_error" text,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "outbox_key_unique" UNIQUE("key")
);
--> statement-breakpoint
CREATE TABLE "signing_key" (
	"kid" text PRIMARY KEY NOT NULL,
	"public_x" text NOT NULL,
	"sealed_private" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text
);
--> statement-breakpoint
CREATE TABLE "caregiver" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"account_id" text,
	"created_at" timestamp (3) with time zone NOT NULL,
	"accepted_at" timestamp (3) with time zone,
	"stop_token_hash" text NOT NULL,
	"mails_stopped_at" timestamp (3) with time zone,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "caregiver_stop_token_hash_unique" UNIQUE("stop_token_hash")
);
--> statement-breakpoint
CREATE TABLE "caregiver_code" (
	"id" uuid PRIMARY KEY NOT NULL,
	"account_id" text NOT NULL,
	"code_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "caregiver_share" (
	"id" uuid PRIMARY KEY NOT NULL,
	"caregiver_id" uuid NOT NULL,
	"adherence" boolean NOT NULL,
	"diary" boolean NOT NULL,
	"missed_mail" boolean NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "consent" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"document_version" text NOT NULL,
	"signed_on" date NOT NULL,
	"answers" jsonb NOT NULL,
	"recorded_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "consent_kind" CHECK (kind in ('own', 'guardian', 'assent'))
);
--> statement-breakpoint
CREATE TABLE "message" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"account_id" text NOT NULL,
	"from_site" boolean NOT NULL,
	"text" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "participant" (
	"id" uuid PRIMARY KEY NOT NULL,
	"site_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"phone" text NOT NULL,
	"born_on" date NOT NULL,
	"zone" text NOT NULL,
	"language" text NOT NULL,
	"emergency_name" text NOT NULL,
	"emergency_phone" text NOT NULL,
	"enrolled_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"account_id" text,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "participant_code_unique" UNIQUE("code")
);
--> statement-breakpoint
CREATE TABLE "screening" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"answers" jsonb NOT NULL,
	"seizure_history" boolean NOT NULL,
	"outcome" text NOT NULL,
	"valid_until" timestamp (3) with time zone NOT NULL,
	"recorded_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "training" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"skills" jsonb NOT NULL,
	"capability" jsonb NOT NULL,
	"helper_name" text,
	"remark" text,
	"signed_off" boolean NOT NULL,
	"valid_until" timestamp (3) with time zone,
	"recorded_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "watched_session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"place" text NOT NULL,
	"until" timestamp (3) with time zone,
	"tolerated" text,
	"remark" text,
	"recorded_by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "diary" (
	"id" uuid PRIMARY KEY NOT NULL,
	"session_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"answers" jsonb NOT NULL,
	"headache" integer,
	"worst_strength" integer,
	"worst_grade" text,
	"emergency_advice" boolean NOT NULL,
	"written_at" timestamp (3) with time zone NOT NULL,
	"account_id" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "lockout" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"level" text NOT NULL,
	"code" text NOT NULL,
	"source" text NOT NULL,
	"source_id" uuid,
	"opened_at" timestamp (3) with time zone NOT NULL,
	"until" timestamp (3) with time zone,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "lockout_level" CHECK (level in ('safety', 'review', 'device', 'hold')),
	CONSTRAINT "lockout_only_holds_end_by_time" CHECK (("lockout"."level" = 'hold') = ("lockout"."until" is not null))
);
--> statement-breakpoint
CREATE TABLE "permit" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"course_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"prescription_id" uuid NOT NULL,
	"precheck_id" uuid NOT NULL,
	"key" text NOT NULL,
	"counter" integer NOT NULL,
	"intensity_ua" integer NOT NULL,
	"charge_uc" bigint NOT NULL,
	"on_ms" integer NOT NULL,
	"token" text NOT NULL,
	"issued_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"expires_by" text NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "permit_intensity_ceiling" CHECK ("permit"."intensity_ua" > 0 and "permit"."intensity_ua" <= 4000),
	CONSTRAINT "permit_charge_ceiling" CHECK ("permit"."charge_uc" > 0 and "permit"."charge_uc" <= 7200000),
	CONSTRAINT "permit_minutes_ceiling" CHECK ("permit"."on_ms" > 0 and "permit"."on_ms" <= 2400000)
);
--> statement-breakpoint
CREATE TABLE "photo" (
	"id" uuid PRIMARY KEY NOT NULL,
	"session_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"jpeg" "bytea" NOT NULL,
	"width" integer NOT NULL,
	"height" integer NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"account_id" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "precheck" (
	"id" uuid PRIMARY KEY NOT NULL,
	"participant_id" uuid NOT NULL,
	"course_id" uuid NOT NULL,
	"account_id" text NOT NULL,
	"answers" jsonb NOT NULL,
	"language" text NOT NULL,
	"complete" boolean NOT NULL,
	"open" jsonb NOT NULL,
	"outcome" text,
	"findings" jsonb NOT NULL,
	"emergency_advice" boolean NOT NULL,
	"helper_present" boolean NOT NULL,
	"helper_account_id" text,
	"answered_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "review" (
	"id" uuid PRIMARY KEY NOT NULL,
	"item_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"finding" text NOT NULL,
	"decision" text NOT NULL,
	"reason" text NOT NULL,
	"grading" jsonb,
	"account_id" text NOT NULL,
	"name" text NOT NULL,
	"content_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"permit_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"course_id" uuid NOT NULL,
	"planned_session_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"started_at" timestamp (3) with time zone,
	"ended_at" timestamp (3) with time zone,
	"end_reason" text,
	"delivered_uc" bigint,
	"upper_uc" bigint,
	"on_ms" integer,
	"fraction_permille" integer,
	"completeness" text,
	"summary" jsonb,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text,
	CONSTRAINT "session_permit_id_unique" UNIQUE("permit_id")
);
--> statement-breakpoint
CREATE TABLE "session_event" (
	"session_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sequence" integer NOT NULL,
	"at_ms" integer NOT NULL,
	"kind" text NOT NULL,
	"body" jsonb NOT NULL,
	"content_hash" text NOT NULL,
	"received_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "session_event_session_id_id_pk" PRIMARY KEY("session_id","id")
);
--> statement-breakpoint
CREATE TABLE "worklist_claim" (
	"id" uuid PRIMARY KEY NOT NULL,
	"item_id" uuid NOT NULL,
	"account_id" text,
	"by" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "worklist_item" (
	"id" uuid PRIMARY KEY NOT NULL,
	"site_id" uuid NOT NULL,
	"participant_id" uuid NOT NULL,
	"level" text NOT NULL,
	"why" text NOT NULL,
	"facts" jsonb NOT NULL,
	"matter" text NOT NULL,
	"session_id" uuid,
	"prescription_id" uuid,
	"lockout_id" uuid,
	"opened_at" timestamp (3) with time zone NOT NULL,
	"escalate_at" timestamp (3) with time zone,
	"escalation" integer DEFAULT 0 NOT NULL,
	"closed_at" timestamp (3) with time zone,
	"closed_why" text
);
--> statement-breakpoint
CREATE TABLE "protocol" (
	"id" uuid PRIMARY KEY NOT NULL,
	"site_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"settings" jsonb NOT NULL,
	"reason" text NOT NULL,
	"signed_by" text NOT NULL,
	"signed_by_name" text NOT NULL,
	"signed_at" timestamp (3) with time zone NOT NULL,
	"content_hash" text NOT NULL,
	CONSTRAINT "protocol_version_from_one" CHECK ("protocol"."version" >= 1)
);
--> statement-breakpoint
CREATE TABLE "site" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"code" text NOT NULL,
	"kind" text NOT NULL,
	"phone" text NOT NULL,
	"emergency_number" text NOT NULL,
	"zone" text NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "site_code_unique" UNIQUE("code"),
	CONSTRAINT "site_kind" CHECK (kind in ('service', 'research'))
);
--> statement-breakpoint
CREATE TABLE "site_counter" (
	"site_id" uuid PRIMARY KEY NOT NULL,
	"last_number" integer DEFAULT 0 NOT NULL
);
--> statement-breakpoint
ALTER TABLE "account" ADD CONSTRAINT "account_id_auth_user_id_fk" FOREIGN KEY ("id") REFERENCES "public"."auth_user"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth_credential" ADD CONSTRAINT "auth_credential_user_id_auth_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."auth_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth_session" ADD CONSTRAINT "auth_session_user_id_auth_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."auth_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth_two_factor" ADD CONSTRAINT "auth_two_factor_user_id_auth_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."auth_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitation" ADD CONSTRAINT "invitation_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership" ADD CONSTRAINT "membership_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership" ADD CONSTRAINT "membership_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgement" ADD CONSTRAINT "acknowledgement_prescription_id_prescription_id_fk" FOREIGN KEY ("prescription_id") REFERENCES "public"."prescription"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgement" ADD CONSTRAINT "acknowledgement_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course" ADD CONSTRAINT "course_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course" ADD CONSTRAINT "course_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course_pause" ADD CONSTRAINT "course_pause_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "planned_session" ADD CONSTRAINT "planned_session_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "planned_session" ADD CONSTRAINT "planned_session_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "planned_session" ADD CONSTRAINT "planned_session_prescription_id_prescription_id_fk" FOREIGN KEY ("prescription_id") REFERENCES "public"."prescription"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "prescription" ADD CONSTRAINT "prescription_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device" ADD CONSTRAINT "device_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device_assignment" ADD CONSTRAINT "device_assignment_device_id_device_id_fk" FOREIGN KEY ("device_id") REFERENCES "public"."device"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device_assignment" ADD CONSTRAINT "device_assignment_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "device_state" ADD CONSTRAINT "device_state_device_id_device_id_fk" FOREIGN KEY ("device_id") REFERENCES "public"."device"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "supply" ADD CONSTRAINT "supply_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caregiver" ADD CONSTRAINT "caregiver_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caregiver" ADD CONSTRAINT "caregiver_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caregiver_code" ADD CONSTRAINT "caregiver_code_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "caregiver_share" ADD CONSTRAINT "caregiver_share_caregiver_id_caregiver_id_fk" FOREIGN KEY ("caregiver_id") REFERENCES "public"."caregiver"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "consent" ADD CONSTRAINT "consent_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "message" ADD CONSTRAINT "message_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "participant" ADD CONSTRAINT "participant_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "participant" ADD CONSTRAINT "participant_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "screening" ADD CONSTRAINT "screening_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "training" ADD CONSTRAINT "training_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "watched_session" ADD CONSTRAINT "watched_session_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "diary" ADD CONSTRAINT "diary_session_id_session_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."session"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "diary" ADD CONSTRAINT "diary_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lockout" ADD CONSTRAINT "lockout_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permit" ADD CONSTRAINT "permit_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permit" ADD CONSTRAINT "permit_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permit" ADD CONSTRAINT "permit_device_id_device_id_fk" FOREIGN KEY ("device_id") REFERENCES "public"."device"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permit" ADD CONSTRAINT "permit_prescription_id_prescription_id_fk" FOREIGN KEY ("prescription_id") REFERENCES "public"."prescription"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "permit" ADD CONSTRAINT "permit_precheck_id_precheck_id_fk" FOREIGN KEY ("precheck_id") REFERENCES "public"."precheck"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photo" ADD CONSTRAINT "photo_session_id_session_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."session"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photo" ADD CONSTRAINT "photo_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "precheck" ADD CONSTRAINT "precheck_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "precheck" ADD CONSTRAINT "precheck_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_item_id_worklist_item_id_fk" FOREIGN KEY ("item_id") REFERENCES "public"."worklist_item"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_permit_id_permit_id_fk" FOREIGN KEY ("permit_id") REFERENCES "public"."permit"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_course_id_course_id_fk" FOREIGN KEY ("course_id") REFERENCES "public"."course"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_planned_session_id_planned_session_id_fk" FOREIGN KEY ("planned_session_id") REFERENCES "public"."planned_session"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session_event" ADD CONSTRAINT "session_event_session_id_session_id_fk" FOREIGN KEY ("session_id") REFERENCES "public"."session"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "worklist_claim" ADD CONSTRAINT "worklist_claim_item_id_worklist_item_id_fk" FOREIGN KEY ("item_id") REFERENCES "public"."worklist_item"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "worklist_item" ADD CONSTRAINT "worklist_item_participant_id_participant_id_fk" FOREIGN KEY ("participant_id") REFERENCES "public"."participant"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "protocol" ADD CONSTRAINT "protocol_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "site_counter" ADD CONSTRAINT "site_counter_site_id_site_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."site"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "account_email" ON "account" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "auth_credential_user" ON "auth_credential" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "auth_session_user" ON "auth_session" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "auth_two_factor_user" ON "auth_two_factor" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "auth_verification_identifier" ON "auth_verification" USING btree ("identifier");--> statement-breakpoint
CREATE INDEX "invitation_subject" ON "invitation" USING btree ("subject_id");--> statement-breakpoint
CREATE INDEX "invitation_site" ON "invitation" USING btree ("site_id","created_at");--> statement-breakpoint
CREATE INDEX "invitation_email" ON "invitation" USING btree ("email");--> statement-breakpoint
CREATE INDEX "membership_site" ON "membership" USING btree ("site_id");--> statement-breakpoint
CREATE INDEX "acknowledgement_participant" ON "acknowledgement" USING btree ("participant_id");--> statement-breakpoint
CREATE UNIQUE INDEX "course_one_active" ON "course" USING btree ("participant_id") WHERE "course"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "course_participant" ON "course" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE UNIQUE INDEX "course_pause_one_open" ON "course_pause" USING btree ("course_id") WHERE "course_pause"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "planned_session_course" ON "planned_session" USING btree ("course_id","window_from");--> statement-breakpoint
CREATE INDEX "planned_session_due" ON "planned_session" USING btree ("window_to") WHERE "planned_session"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "prescription_version" ON "prescription" USING btree ("course_id","version") WHERE "prescription"."version" is not null;--> statement-breakpoint
CREATE UNIQUE INDEX "prescription_one_in_force" ON "prescription" USING btree ("course_id") WHERE "prescription"."signed_at" is not null and "prescription"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "prescription_participant" ON "prescription" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "signature_subject" ON "signature" USING btree ("subject_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "signature_once_a_person" ON "signature" USING btree ("subject_id","account_id") WHERE "signature"."subject_kind" = 'prescription';--> statement-breakpoint
CREATE UNIQUE INDEX "signature_once_a_meaning" ON "signature" USING btree ("subject_id","meaning");--> statement-breakpoint
CREATE INDEX "device_site_label" ON "device" USING btree ("site_id","label","id");--> statement-breakpoint
CREATE UNIQUE INDEX "device_assignment_one_person" ON "device_assignment" USING btree ("device_id") WHERE "device_assignment"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "device_assignment_one_device" ON "device_assignment" USING btree ("participant_id") WHERE "device_assignment"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "device_state_number" ON "device_state" USING btree ("device_id","number" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "supply_participant" ON "supply" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "audit_entry_site" ON "audit_entry" USING btree ("site_id","at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "audit_entry_participant" ON "audit_entry" USING btree ("participant_id","at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "demo_mail_sent" ON "demo_mail" USING btree ("sent_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "key_seen_age" ON "key_seen" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "outbox_due" ON "outbox" USING btree ("urgent" DESC NULLS LAST,"due_at") WHERE "outbox"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "caregiver_open" ON "caregiver" USING btree ("participant_id",lower("email")) WHERE "caregiver"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "caregiver_account" ON "caregiver" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "caregiver_code_newest" ON "caregiver_code" USING btree ("account_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "caregiver_share_newest" ON "caregiver_share" USING btree ("caregiver_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "consent_participant" ON "consent" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "message_participant" ON "message" USING btree ("participant_id","created_at" DESC NULLS LAST,"id");--> statement-breakpoint
CREATE UNIQUE INDEX "participant_account" ON "participant" USING btree ("account_id") WHERE "participant"."account_id" is not null;--> statement-breakpoint
CREATE UNIQUE INDEX "participant_email_open" ON "participant" USING btree (lower("email")) WHERE "participant"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "participant_site_name" ON "participant" USING btree ("site_id","name","id");--> statement-breakpoint
CREATE INDEX "participant_site_code" ON "participant" USING btree ("site_id","code");--> statement-breakpoint
CREATE INDEX "participant_site_created" ON "participant" USING btree ("site_id","created_at","id");--> statement-breakpoint
CREATE INDEX "screening_participant" ON "screening" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "training_participant" ON "training" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "watched_session_participant" ON "watched_session" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE UNIQUE INDEX "diary_once" ON "diary" USING btree ("session_id","kind");--> statement-breakpoint
CREATE INDEX "diary_participant" ON "diary" USING btree ("participant_id","written_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "lockout_open" ON "lockout" USING btree ("participant_id") WHERE "lockout"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "lockout_participant" ON "lockout" USING btree ("participant_id","opened_at" DESC NULLS LAST);--> statement-breakpoint
CREATE UNIQUE INDEX "permit_one_live" ON "permit" USING btree ("participant_id") WHERE "permit"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "permit_precheck_once" ON "permit" USING btree ("precheck_id");--> statement-breakpoint
CREATE UNIQUE INDEX "permit_counter" ON "permit" USING btree ("device_id","counter");--> statement-breakpoint
CREATE UNIQUE INDEX "permit_key" ON "permit" USING btree ("participant_id","key");--> statement-breakpoint
CREATE INDEX "permit_newest" ON "permit" USING btree ("participant_id","issued_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "permit_expiry" ON "permit" USING btree ("expires_at") WHERE "permit"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "photo_session" ON "photo" USING btree ("session_id");--> statement-breakpoint
CREATE INDEX "precheck_newest" ON "precheck" USING btree ("participant_id","answered_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "review_participant" ON "review" USING btree ("participant_id","created_at" DESC NULLS LAST,"id");--> statement-breakpoint
CREATE INDEX "session_participant" ON "session" USING btree ("participant_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "session_course" ON "session" USING btree ("course_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "session_one_open" ON "session" USING btree ("participant_id") WHERE "session"."started_at" is not null and "session"."closed_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "session_event_sequence" ON "session_event" USING btree ("session_id","sequence");--> statement-breakpoint
CREATE INDEX "worklist_claim_newest" ON "worklist_claim" USING btree ("item_id","created_at" DESC NULLS LAST);--> statement-breakpoint
CREATE UNIQUE INDEX "worklist_item_matter" ON "worklist_item" USING btree ("participant_id","matter") WHERE "worklist_item"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "worklist_item_site" ON "worklist_item" USING btree ("site_id","opened_at" DESC NULLS LAST) WHERE "worklist_item"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "worklist_item_escalation" ON "worklist_item" USING btree ("escalate_at") WHERE "worklist_item"."closed_at" is null and "worklist_item"."escalate_at" is not null;--> statement-breakpoint
CREATE UNIQUE INDEX "protocol_site_version" ON "protocol" USING btree ("site_id","version" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "protocol_signed_at" ON "protocol" USING btree ("signed_at");