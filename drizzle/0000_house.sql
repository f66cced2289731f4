CREATE TABLE "audit_event" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"actor_id" uuid,
	"sign_in_session_id" uuid,
	"action" text NOT NULL,
	"target_type" text NOT NULL,
	"target_id" text,
	"patient_id" uuid,
	"request_id" text NOT NULL,
	"reason" text,
	"before" jsonb,
	"after" jsonb
);
--> statement-breakpoint
CREATE TABLE "bout" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"started_at" timestamp (3) with time zone NOT NULL,
	"ended_at" timestamp (3) with time zone,
	"weight_off_kg" real,
	"assistance" text NOT NULL,
	"helpers" smallint,
	"arm_support" boolean DEFAULT false NOT NULL,
	"exertion" smallint,
	"vitals" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"buckles" smallint,
	"pain" smallint,
	"symptoms" text[] DEFAULT '{}' NOT NULL,
	"load_stronger_kg" real,
	"load_weaker_kg" real,
	"aids" text[] DEFAULT '{}' NOT NULL,
	"cues" text,
	"ended_because" text,
	"ended_note" text,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "bout_session_id" UNIQUE("clinic_id","session_id","id"),
	CONSTRAINT "bout_order" CHECK ("bout"."ended_at" > "bout"."started_at"),
	CONSTRAINT "bout_weight_off" CHECK ("bout"."weight_off_kg" between 0 and 400),
	CONSTRAINT "bout_loads" CHECK ("bout"."load_stronger_kg" between 0 and 400 and "bout"."load_weaker_kg" between 0 and 400),
	CONSTRAINT "bout_assistance" CHECK ("bout"."assistance" in ('independent', 'set-up', 'supervision', 'partial', 'substantial', 'dependent')),
	CONSTRAINT "bout_helpers" CHECK ("bout"."helpers" between 0 and 6),
	CONSTRAINT "bout_exertion" CHECK ("bout"."exertion" between 0 and 10),
	CONSTRAINT "bout_pain" CHECK ("bout"."pain" between 0 and 10),
	CONSTRAINT "bout_buckles" CHECK ("bout"."buckles" between 0 and 200)
);
--> statement-breakpoint
CREATE TABLE "care_team_member" (
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"joined_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "care_team_member_key" PRIMARY KEY("patient_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "chart_opening" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"opened_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "chart_opening_reason" CHECK (char_length("chart_opening"."reason") between 10 and 500),
	CONSTRAINT "chart_opening_span" CHECK ("chart_opening"."expires_at" > "chart_opening"."opened_at" and "chart_opening"."expires_at" <= "chart_opening"."opened_at" + interval '61 minutes')
);
--> statement-breakpoint
CREATE TABLE "clinic" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"time_zone" text DEFAULT 'UTC' NOT NULL,
	"units" text DEFAULT 'metric' NOT NULL,
	"targets" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "clinic_name_length" CHECK (char_length("clinic"."name") between 1 and 200),
	CONSTRAINT "clinic_units" CHECK ("clinic"."units" in ('metric', 'us'))
);
--> statement-breakpoint
CREATE TABLE "clip_frame_table" (
	"clip_id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"times_us" integer[] NOT NULL,
	"key_frames" integer[] NOT NULL,
	"key_offsets" bigint[] NOT NULL,
	CONSTRAINT "clip_frame_table_first" CHECK ("clip_frame_table"."times_us"[1] = 0),
	CONSTRAINT "clip_frame_table_keys" CHECK ("clip_frame_table"."key_frames"[1] = 0 and cardinality("clip_frame_table"."key_frames") = cardinality("clip_frame_table"."key_offsets"))
);
--> statement-breakpoint
CREATE TABLE "clip" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"session_id" uuid NOT NULL,
	"bout_id" uuid,
	"uploaded_by_id" uuid NOT NULL,
	"file_name" text NOT NULL,
	"size" bigint NOT NULL,
	"content_type" text NOT NULL,
	"view" text NOT NULL,
	"side" text,
	"recorded_at" timestamp (3) with time zone,
	"status" text DEFAULT 'uploading' NOT NULL,
	"reason" text,
	"progress" real DEFAULT 0 NOT NULL,
	"attempt" integer DEFAULT 0 NOT NULL,
	"lease_until" timestamp (3) with time zone,
	"crashes" integer DEFAULT 0 NOT NULL,
	"original_key" text NOT NULL,
	"upload_id" text,
	"part_size" integer NOT NULL,
	"part_count" integer NOT NULL,
	"review_key" text,
	"review_size" bigint,
	"poster_key" text,
	"filmstrip_key" text,
	"filmstrip" jsonb,
	"width" integer,
	"height" integer,
	"frame_count" integer,
	"frame_rate" real,
	"duration_ms" integer,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "clip_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "clip_patient_id" UNIQUE("clinic_id","patient_id","id"),
	CONSTRAINT "clip_original_key" UNIQUE("original_key"),
	CONSTRAINT "clip_view" CHECK ("clip"."view" in ('sagittal', 'frontal-anterior', 'frontal-posterior')),
	CONSTRAINT "clip_status" CHECK ("clip"."status" in ('uploading', 'processing', 'ready', 'refused')),
	CONSTRAINT "clip_reason" CHECK (("clip"."status" = 'refused') = ("clip"."reason" is not null)),
	CONSTRAINT "clip_size" CHECK ("clip"."size" > 0),
	CONSTRAINT "clip_progress" CHECK ("clip"."progress" between 0 and 1),
	CONSTRAINT "clip_ready_is_whole" CHECK ("clip"."status" <> 'ready' or num_nonnulls("clip"."review_key", "clip"."review_size", "clip"."poster_key", "clip"."filmstrip_key", "clip"."width", "clip"."height", "clip"."frame_count", "clip"."frame_rate", "clip"."duration_ms") = 9)
);
--> statement-breakpoint
CREATE TABLE "consent" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"given_on" date NOT NULL,
	"given_by" text NOT NULL,
	"given_by_relation" text NOT NULL,
	"note" text,
	"recorded_by_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"withdrawn_at" timestamp (3) with time zone,
	"withdrawn_by_id" uuid,
	CONSTRAINT "consent_kind" CHECK ("consent"."kind" in ('recording', 'teaching', 'sharing')),
	CONSTRAINT "consent_relation" CHECK ("consent"."given_by_relation" in ('self', 'proxy', 'guardian')),
	CONSTRAINT "consent_given_by" CHECK (char_length("consent"."given_by") between 1 and 200),
	CONSTRAINT "consent_withdrawal" CHECK (("consent"."withdrawn_at" is null) = ("consent"."withdrawn_by_id" is null))
);
--> statement-breakpoint
CREATE TABLE "idempotency_key" (
	"clinic_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"route" text NOT NULL,
	"key" text NOT NULL,
	"body_hash" text NOT NULL,
	"status" integer,
	"answer" jsonb,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_key_key" PRIMARY KEY("user_id","route","key")
);
--> statement-breakpoint
CREATE TABLE "marking_version" (
	"clinic_id" uuid NOT NULL,
	"marking_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"status" text NOT NULL,
	"body" jsonb NOT NULL,
	"saved_by_id" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "marking_version_key" PRIMARY KEY("marking_id","version"),
	CONSTRAINT "marking_version_number" CHECK ("marking_version"."version" >= 1),
	CONSTRAINT "marking_version_status" CHECK ("marking_version"."status" in ('draft', 'final'))
);
--> statement-breakpoint
CREATE TABLE "marking" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"still_id" uuid NOT NULL,
	"author_id" uuid NOT NULL,
	"current_version" integer DEFAULT 1 NOT NULL,
	"final_version" integer,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "marking_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "marking_patient_id" UNIQUE("clinic_id","patient_id","id"),
	CONSTRAINT "marking_versions" CHECK ("marking"."current_version" >= 1 and ("marking"."final_version" is null or "marking"."final_version" between 1 and "marking"."current_version"))
);
--> statement-breakpoint
CREATE TABLE "patient" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"name" text NOT NULL,
	"record_number" text NOT NULL,
	"birth_date" date NOT NULL,
	"weaker_side" text NOT NULL,
	"height_cm" real,
	"mass_kg" real,
	"stroke_on" date,
	"precautions" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"lateropulsion" text,
	"neglect_side" text,
	"visual_field_loss_side" text,
	"has_aphasia" boolean DEFAULT false NOT NULL,
	"notes" text,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "patient_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "patient_record_number" UNIQUE("clinic_id","record_number"),
	CONSTRAINT "patient_name_length" CHECK (char_length("patient"."name") between 1 and 200),
	CONSTRAINT "patient_record_number_length" CHECK (char_length("patient"."record_number") between 1 and 64),
	CONSTRAINT "patient_birth_date" CHECK ("patient"."birth_date" >= '1900-01-01'),
	CONSTRAINT "patient_weaker_side" CHECK ("patient"."weaker_side" in ('left', 'right', 'both')),
	CONSTRAINT "patient_sides" CHECK (coalesce("patient"."lateropulsion", 'left') in ('left', 'right') and coalesce("patient"."neglect_side", 'left') in ('left', 'right') and coalesce("patient"."visual_field_loss_side", 'left') in ('left', 'right')),
	CONSTRAINT "patient_height" CHECK ("patient"."height_cm" between 30 and 260),
	CONSTRAINT "patient_mass" CHECK ("patient"."mass_kg" between 2 and 400)
);
--> statement-breakpoint
CREATE TABLE "reading" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"marking_id" uuid NOT NULL,
	"marking_version" integer NOT NULL,
	"measure" text NOT NULL,
	"definition_version" integer NOT NULL,
	"view" text NOT NULL,
	"side" text,
	"value" double precision NOT NULL,
	"unit" text NOT NULL,
	"sd" double precision NOT NULL,
	"low" double precision NOT NULL,
	"high" double precision NOT NULL,
	"target_status" text,
	"warnings" text[] DEFAULT '{}' NOT NULL,
	CONSTRAINT "reading_band" CHECK ("reading"."sd" >= 0 and "reading"."low" <= "reading"."value" and "reading"."value" <= "reading"."high"),
	CONSTRAINT "reading_finite" CHECK ("reading"."value" <> 'NaN' and abs("reading"."value") <> 'Infinity' and "reading"."sd" <> 'NaN' and "reading"."sd" <> 'Infinity')
);
--> statement-breakpoint
CREATE TABLE "session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"started_at" timestamp (3) with time zone NOT NULL,
	"notes" text,
	"checklist" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"mass_kg" real,
	"created_by_id" uuid NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "session_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "session_patient_id" UNIQUE("clinic_id","patient_id","id"),
	CONSTRAINT "session_mass" CHECK ("session"."mass_kg" between 2 and 400)
);
--> statement-breakpoint
CREATE TABLE "sign_in_attempt" (
	"id" uuid PRIMARY KEY NOT NULL,
	"account" text NOT NULL,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"is_success" boolean DEFAULT false NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sign_in_session" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"token_hash" "bytea" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"revoked_at" timestamp (3) with time zone,
	"user_agent" text,
	CONSTRAINT "sign_in_session_token" UNIQUE("token_hash"),
	CONSTRAINT "sign_in_session_hash_length" CHECK (octet_length("sign_in_session"."token_hash") = 32)
);
--> statement-breakpoint
CREATE TABLE "still" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"patient_id" uuid NOT NULL,
	"clip_id" uuid NOT NULL,
	"frame" integer NOT NULL,
	"time_us" bigint NOT NULL,
	"width" integer NOT NULL,
	"height" integer NOT NULL,
	"image_key" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "still_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "still_patient_id" UNIQUE("clinic_id","patient_id","id"),
	CONSTRAINT "still_frame" UNIQUE("clip_id","frame"),
	CONSTRAINT "still_frame_range" CHECK ("still"."frame" >= 0 and "still"."time_us" >= 0),
	CONSTRAINT "still_picture" CHECK ("still"."width" > 0 and "still"."height" > 0)
);
--> statement-breakpoint
CREATE TABLE "user_account" (
	"id" uuid PRIMARY KEY NOT NULL,
	"clinic_id" uuid NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"roles" text[] NOT NULL,
	"password_hash" text NOT NULL,
	"patient_id" uuid,
	"disabled_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "user_account_clinic_id" UNIQUE("clinic_id","id"),
	CONSTRAINT "user_account_roles" CHECK (cardinality("user_account"."roles") > 0 and "user_account"."roles" <@ array['therapist', 'student', 'patient', 'administrator']),
	CONSTRAINT "user_account_patient_role" CHECK (("user_account"."patient_id" is not null) = ('patient' = any("user_account"."roles"))),
	CONSTRAINT "user_account_email_form" CHECK ("user_account"."email" ~ '^[^@[:space:]]+@[^@[:space:]]+$' and char_length("user_account"."email") <= 254)
);
--> statement-breakpoint
ALTER TABLE "audit_event" ADD CONSTRAINT "audit_event_clinic_id_clinic_id_fk" FOREIGN KEY ("clinic_id") REFERENCES "public"."clinic"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bout" ADD CONSTRAINT "bout_session" FOREIGN KEY ("clinic_id","patient_id","session_id") REFERENCES "public"."session"("clinic_id","patient_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "care_team_member" ADD CONSTRAINT "care_team_member_patient" FOREIGN KEY ("clinic_id","patient_id") REFERENCES "public"."patient"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "care_team_member" ADD CONSTRAINT "care_team_member_user" FOREIGN KEY ("clinic_id","user_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_opening" ADD CONSTRAINT "chart_opening_patient" FOREIGN KEY ("clinic_id","patient_id") REFERENCES "public"."patient"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chart_opening" ADD CONSTRAINT "chart_opening_user" FOREIGN KEY ("clinic_id","user_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clip_frame_table" ADD CONSTRAINT "clip_frame_table_clip" FOREIGN KEY ("clinic_id","clip_id") REFERENCES "public"."clip"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clip" ADD CONSTRAINT "clip_session" FOREIGN KEY ("clinic_id","patient_id","session_id") REFERENCES "public"."session"("clinic_id","patient_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clip" ADD CONSTRAINT "clip_bout" FOREIGN KEY ("clinic_id","session_id","bout_id") REFERENCES "public"."bout"("clinic_id","session_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "clip" ADD CONSTRAINT "clip_uploader" FOREIGN KEY ("clinic_id","uploaded_by_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "consent" ADD CONSTRAINT "consent_patient" FOREIGN KEY ("clinic_id","patient_id") REFERENCES "public"."patient"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "consent" ADD CONSTRAINT "consent_recorder" FOREIGN KEY ("clinic_id","recorded_by_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "consent" ADD CONSTRAINT "consent_withdrawer" FOREIGN KEY ("clinic_id","withdrawn_by_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marking_version" ADD CONSTRAINT "marking_version_marking" FOREIGN KEY ("clinic_id","marking_id") REFERENCES "public"."marking"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marking_version" ADD CONSTRAINT "marking_version_saver" FOREIGN KEY ("clinic_id","saved_by_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marking" ADD CONSTRAINT "marking_still" FOREIGN KEY ("clinic_id","patient_id","still_id") REFERENCES "public"."still"("clinic_id","patient_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "marking" ADD CONSTRAINT "marking_author" FOREIGN KEY ("clinic_id","author_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "patient" ADD CONSTRAINT "patient_clinic_id_clinic_id_fk" FOREIGN KEY ("clinic_id") REFERENCES "public"."clinic"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reading" ADD CONSTRAINT "reading_marking_version" FOREIGN KEY ("marking_id","marking_version") REFERENCES "public"."marking_version"("marking_id","version") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reading" ADD CONSTRAINT "reading_marking" FOREIGN KEY ("clinic_id","patient_id","marking_id") REFERENCES "public"."marking"("clinic_id","patient_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_patient" FOREIGN KEY ("clinic_id","patient_id") REFERENCES "public"."patient"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_author" FOREIGN KEY ("clinic_id","created_by_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sign_in_session" ADD CONSTRAINT "sign_in_session_user" FOREIGN KEY ("clinic_id","user_id") REFERENCES "public"."user_account"("clinic_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "still" ADD CONSTRAINT "still_clip" FOREIGN KEY ("clinic_id","patient_id","clip_id") REFERENCES "public"."clip"("clinic_id","patient_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "user_account" ADD CONSTRAINT "user_account_clinic_id_clinic_id_fk" FOREIGN KEY ("clinic_id") REFERENCES "public"."clinic"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "user_account" ADD CONSTRAINT "user_account_patient" FOREIGN KEY ("clinic_id","patient_id") REFERENCES "public"."patient"("clinic_id","id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_event_by_time" ON "audit_event" USING btree ("clinic_id","at");--> statement-breakpoint
CREATE INDEX "audit_event_by_patient" ON "audit_event" USING btree ("clinic_id","patient_id","at");--> statement-breakpoint
CREATE INDEX "audit_event_by_actor" ON "audit_event" USING btree ("clinic_id","actor_id","at");--> statement-breakpoint
CREATE INDEX "bout_by_session" ON "bout" USING btree ("clinic_id","session_id","started_at");--> statement-breakpoint
CREATE INDEX "bout_by_patient" ON "bout" USING btree ("clinic_id","patient_id","started_at");--> statement-breakpoint
CREATE INDEX "care_team_member_by_user" ON "care_team_member" USING btree ("user_id","patient_id");--> statement-breakpoint
CREATE INDEX "chart_opening_by_user" ON "chart_opening" USING btree ("user_id","patient_id","expires_at");--> statement-breakpoint
CREATE INDEX "clip_by_session" ON "clip" USING btree ("clinic_id","session_id","created_at");--> statement-breakpoint
CREATE INDEX "clip_by_patient" ON "clip" USING btree ("clinic_id","patient_id","created_at");--> statement-breakpoint
CREATE INDEX "clip_unfinished" ON "clip" USING btree ("status","updated_at") WHERE "clip"."status" in ('uploading', 'processing');--> statement-breakpoint
CREATE INDEX "consent_in_force" ON "consent" USING btree ("patient_id","kind") WHERE "consent"."withdrawn_at" is null;--> statement-breakpoint
CREATE INDEX "marking_by_still" ON "marking" USING btree ("still_id");--> statement-breakpoint
CREATE INDEX "marking_by_patient" ON "marking" USING btree ("clinic_id","patient_id");--> statement-breakpoint
CREATE INDEX "patient_by_name" ON "patient" USING btree ("clinic_id","name");--> statement-breakpoint
CREATE INDEX "reading_by_marking" ON "reading" USING btree ("marking_id","marking_version");--> statement-breakpoint
CREATE INDEX "reading_by_patient" ON "reading" USING btree ("clinic_id","patient_id","measure");--> statement-breakpoint
CREATE INDEX "session_by_patient" ON "session" USING btree ("clinic_id","patient_id","started_at");--> statement-breakpoint
CREATE INDEX "session_by_time" ON "session" USING btree ("clinic_id","started_at");--> statement-breakpoint
CREATE INDEX "sign_in_attempt_recent" ON "sign_in_attempt" USING btree ("account","at");--> statement-breakpoint
CREATE INDEX "sign_in_session_by_user" ON "sign_in_session" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "user_account_email" ON "user_account" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "user_account_by_clinic" ON "user_account" USING btree ("clinic_id","name");