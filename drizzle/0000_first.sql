CREATE TYPE "public"."passed_by" AS ENUM('tap', 'distance', 'skipped', 'not reached');--> statement-breakpoint
CREATE TYPE "public"."speed_unit" AS ENUM('km/h', 'mph');--> statement-breakpoint
CREATE TYPE "public"."event_role" AS ENUM('organiser', 'timekeeper', 'scrutineer', 'marshal');--> statement-breakpoint
CREATE TYPE "public"."member_role" AS ENUM('manager', 'navigator', 'driver', 'crew');--> statement-breakpoint
CREATE TYPE "public"."distance_unit" AS ENUM('km', 'mi');--> statement-breakpoint
CREATE TYPE "public"."own_duty" AS ENUM('settle', 'scale', 'place');--> statement-breakpoint
CREATE TYPE "public"."road_side" AS ENUM('left', 'right');--> statement-breakpoint
CREATE TYPE "public"."run_status" AS ENUM('receiving', 'computing', 'ready', 'failed');--> statement-breakpoint
CREATE TYPE "public"."team_kind" AS ENUM('crew', 'organiser');--> statement-breakpoint
CREATE TYPE "public"."scale_source" AS ENUM('nominal', 'measured distance', 'run');--> statement-breakpoint
CREATE TABLE "attempts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"entry_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"course_book_id" uuid NOT NULL,
	"course_book_version" integer NOT NULL,
	"release_at" timestamp (3) with time zone,
	"staged_behind_m" double precision DEFAULT 0 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "attempts_entry_id_number_key" UNIQUE("entry_id","number"),
	CONSTRAINT "attempts_id_entry_id_key" UNIQUE("id","entry_id"),
	CONSTRAINT "attempts_number_from_one" CHECK ("attempts"."number" >= 1),
	CONSTRAINT "attempts_staged_range" CHECK ("attempts"."staged_behind_m" between 0 and 200)
);
--> statement-breakpoint
CREATE TABLE "auth_sessions" (
	"id" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"absolute_expires_at" timestamp (3) with time zone NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "auth_sessions_id_is_digest" CHECK ("auth_sessions"."id" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "cars" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"name" text NOT NULL,
	"dial_reads_high_percent" double precision DEFAULT 0 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "cars_team_id_name_key" UNIQUE("team_id","name"),
	CONSTRAINT "cars_id_team_id_key" UNIQUE("id","team_id"),
	CONSTRAINT "cars_dial_believable" CHECK ("cars"."dial_reads_high_percent" between -20 and 20)
);
--> statement-breakpoint
CREATE TABLE "checkpoint_records" (
	"result_id" uuid NOT NULL,
	"checkpoint_id" text NOT NULL,
	"position" integer NOT NULL,
	"passed_by" "passed_by" NOT NULL,
	"official_m" double precision NOT NULL,
	"at_us" bigint,
	"elapsed_s" double precision,
	"time_error_s" double precision,
	"moved_m" double precision,
	"scale_before" double precision NOT NULL,
	"scale_after" double precision NOT NULL,
	CONSTRAINT "checkpoint_records_result_id_checkpoint_id_pk" PRIMARY KEY("result_id","checkpoint_id"),
	CONSTRAINT "checkpoint_records_position" CHECK ("checkpoint_records"."position" >= 0)
);
--> statement-breakpoint
CREATE TABLE "counting_runs" (
	"attempt_id" uuid PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"chosen_by" uuid,
	"chosen_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "course_book_versions" (
	"course_book_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"body" jsonb NOT NULL,
	"length_m" double precision NOT NULL,
	"published_by" uuid,
	"published_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "course_book_versions_course_book_id_version_pk" PRIMARY KEY("course_book_id","version"),
	CONSTRAINT "course_book_versions_from_one" CHECK ("course_book_versions"."version" >= 1),
	CONSTRAINT "course_book_versions_length" CHECK ("course_book_versions"."length_m" > 0),
	CONSTRAINT "course_book_versions_body_agrees" CHECK ("course_book_versions"."body"->>'id' = "course_book_versions"."course_book_id"::text and ("course_book_versions"."body"->>'version')::int = "course_book_versions"."version")
);
--> statement-breakpoint
CREATE TABLE "course_books" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_team_id" uuid NOT NULL,
	"event_id" uuid,
	"name" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "crew_zones" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"course_book_id" uuid NOT NULL,
	"place_id" text NOT NULL,
	"name" text NOT NULL,
	"from_text" text NOT NULL,
	"to_text" text NOT NULL,
	"unit" "distance_unit" NOT NULL,
	"limit_text" text NOT NULL,
	"limit_unit" "speed_unit" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "crew_zones_place_key" UNIQUE("team_id","course_book_id","place_id"),
	CONSTRAINT "crew_zones_in_order" CHECK ("crew_zones"."to_text"::numeric > "crew_zones"."from_text"::numeric)
);
--> statement-breakpoint
CREATE TABLE "entries" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"event_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"car_id" uuid NOT NULL,
	"wheel_setup_id" uuid NOT NULL,
	"race_class_id" uuid NOT NULL,
	"number" text NOT NULL,
	"plan_settings" jsonb NOT NULL,
	"cockpit_settings" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "entries_event_id_number_key" UNIQUE("event_id","number"),
	CONSTRAINT "entries_id_team_id_key" UNIQUE("id","team_id")
);
--> statement-breakpoint
CREATE TABLE "entry_crew" (
	"entry_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" "member_role" NOT NULL,
	CONSTRAINT "entry_crew_entry_id_user_id_pk" PRIMARY KEY("entry_id","user_id"),
	CONSTRAINT "entry_crew_seat_key" UNIQUE("entry_id","role")
);
--> statement-breakpoint
CREATE TABLE "event_members" (
	"event_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" "event_role" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "event_members_event_id_user_id_role_pk" PRIMARY KEY("event_id","user_id","role")
);
--> statement-breakpoint
CREATE TABLE "events" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_team_id" uuid NOT NULL,
	"name" text NOT NULL,
	"place" text NOT NULL,
	"time_zone" text NOT NULL,
	"starts_on" date NOT NULL,
	"ends_on" date NOT NULL,
	"practice" boolean DEFAULT false NOT NULL,
	"rules" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "events_days_in_order" CHECK ("events"."ends_on" >= "events"."starts_on")
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"team_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" "member_role" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_team_id_user_id_pk" PRIMARY KEY("team_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "own_checkpoints" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"course_book_id" uuid NOT NULL,
	"place_id" text NOT NULL,
	"name" text NOT NULL,
	"duty" "own_duty" NOT NULL,
	"at_text" text NOT NULL,
	"at_unit" "distance_unit" NOT NULL,
	"side" "road_side",
	"note" text DEFAULT '' NOT NULL,
	"lat" double precision,
	"lon" double precision,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "own_checkpoints_place_key" UNIQUE("team_id","course_book_id","place_id"),
	CONSTRAINT "own_checkpoints_at_is_distance" CHECK ("own_checkpoints"."at_text" ~ '^[0-9]{1,4}([.][0-9]{1,6})?$'),
	CONSTRAINT "own_checkpoints_position_whole" CHECK (("own_checkpoints"."lat" is null) = ("own_checkpoints"."lon" is null))
);
--> statement-breakpoint
CREATE TABLE "packs" (
	"digest" text PRIMARY KEY NOT NULL,
	"attempt_id" uuid NOT NULL,
	"canonical" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "packs_digest_of_canonical" CHECK ("packs"."digest" = encode(sha256(convert_to("packs"."canonical", 'UTF8')), 'hex'))
);
--> statement-breakpoint
CREATE TABLE "race_classes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"event_id" uuid NOT NULL,
	"name" text NOT NULL,
	"target_time_ms" integer NOT NULL,
	"sections" jsonb NOT NULL,
	"cap" jsonb,
	"floor" jsonb,
	"aid_wheel" boolean NOT NULL,
	"aid_gnss_speed" boolean NOT NULL,
	"aid_gnss_position" boolean NOT NULL,
	"aid_data_link" boolean NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "race_classes_event_id_name_key" UNIQUE("event_id","name"),
	CONSTRAINT "race_classes_id_event_id_key" UNIQUE("id","event_id"),
	CONSTRAINT "race_classes_target_time" CHECK ("race_classes"."target_time_ms" between 1 and 86400000),
	CONSTRAINT "race_classes_has_sections" CHECK (jsonb_array_length("race_classes"."sections") >= 1)
);
--> statement-breakpoint
CREATE TABLE "run_chunks" (
	"run_id" uuid NOT NULL,
	"n" integer NOT NULL,
	"bytes" "bytea" NOT NULL,
	"digest" text NOT NULL,
	"first_seq" bigint NOT NULL,
	"count" integer NOT NULL,
	"received_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "run_chunks_run_id_n_pk" PRIMARY KEY("run_id","n"),
	CONSTRAINT "run_chunks_n" CHECK ("run_chunks"."n" >= 0),
	CONSTRAINT "run_chunks_not_empty" CHECK ("run_chunks"."count" >= 1 and length("run_chunks"."bytes") >= 1),
	CONSTRAINT "run_chunks_digest" CHECK ("run_chunks"."digest" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "run_results" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"run_id" uuid NOT NULL,
	"pack_digest" text NOT NULL,
	"engine_version" text NOT NULL,
	"journal_head" text NOT NULL,
	"amendment_head" text NOT NULL,
	"sheet" jsonb NOT NULL,
	"computed_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "run_results_key" UNIQUE("run_id","pack_digest","engine_version","journal_head","amendment_head")
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY NOT NULL,
	"entry_id" uuid NOT NULL,
	"attempt_id" uuid NOT NULL,
	"device_id" text NOT NULL,
	"pack_digest" text NOT NULL,
	"clock_rate" double precision NOT NULL,
	"practice" boolean NOT NULL,
	"made_at" timestamp (3) with time zone NOT NULL,
	"app_version" text NOT NULL,
	"header_digest" text NOT NULL,
	"chunk_count" integer DEFAULT 0 NOT NULL,
	"head" text DEFAULT '0000000000000000000000000000000000000000000000000000000000000000' NOT NULL,
	"next_seq" bigint DEFAULT 0 NOT NULL,
	"status" "run_status" DEFAULT 'receiving' NOT NULL,
	"sealed_at" timestamp (3) with time zone,
	"failure_message" text,
	"failure_at" timestamp (3) with time zone,
	"received_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "runs_attempt_id_id_key" UNIQUE("attempt_id","id"),
	CONSTRAINT "runs_clock_rate" CHECK ("runs"."clock_rate" > 0),
	CONSTRAINT "runs_sealed_when_done" CHECK (("runs"."sealed_at" is null) = ("runs"."status" = 'receiving')),
	CONSTRAINT "runs_failure_told" CHECK (("runs"."status" = 'failed') = ("runs"."failure_message" is not null)),
	CONSTRAINT "runs_head_starts_at_zero" CHECK (("runs"."chunk_count" = 0) = ("runs"."head" = repeat('0', 64))),
	CONSTRAINT "runs_digests" CHECK ("runs"."head" ~ '^[0-9a-f]{64}$' and "runs"."header_digest" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "sign_in_failures" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"account_key" text NOT NULL,
	"address" text NOT NULL,
	"failed_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"kind" "team_kind" DEFAULT 'crew' NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "teams_name_not_empty" CHECK (length("teams"."name") between 1 and 120)
);
--> statement-breakpoint
CREATE TABLE "upload_grants" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"token_hash" text NOT NULL,
	"entry_id" uuid NOT NULL,
	"issued_to" uuid NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"revoked_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "upload_grants_token_hash_key" UNIQUE("token_hash"),
	CONSTRAINT "upload_grants_hash_is_digest" CHECK ("upload_grants"."token_hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "users_email_key" UNIQUE("email"),
	CONSTRAINT "users_email_lower_case" CHECK ("users"."email" = lower("users"."email")),
	CONSTRAINT "users_name_not_empty" CHECK (length("users"."name") between 1 and 120)
);
--> statement-breakpoint
CREATE TABLE "wheel_scales" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"wheel_setup_id" uuid NOT NULL,
	"mm_per_pulse" double precision NOT NULL,
	"scale_sigma" double precision NOT NULL,
	"source" "scale_source" NOT NULL,
	"run_id" uuid,
	"note" text DEFAULT '' NOT NULL,
	"recorded_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "wheel_scales_positive" CHECK ("wheel_scales"."mm_per_pulse" > 0 and "wheel_scales"."mm_per_pulse" <= 5000),
	CONSTRAINT "wheel_scales_sigma_range" CHECK ("wheel_scales"."scale_sigma" >= 0 and "wheel_scales"."scale_sigma" <= 0.2),
	CONSTRAINT "wheel_scales_run_named" CHECK (("wheel_scales"."source" = 'run') = ("wheel_scales"."run_id" is not null))
);
--> statement-breakpoint
CREATE TABLE "wheel_setups" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"car_id" uuid NOT NULL,
	"name" text NOT NULL,
	"tyre" text NOT NULL,
	"channel" integer NOT NULL,
	"pulses_per_turn" integer NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "wheel_setups_car_id_name_key" UNIQUE("car_id","name"),
	CONSTRAINT "wheel_setups_id_car_id_key" UNIQUE("id","car_id"),
	CONSTRAINT "wheel_setups_channel_range" CHECK ("wheel_setups"."channel" between 0 and 15),
	CONSTRAINT "wheel_setups_pulses_range" CHECK ("wheel_setups"."pulses_per_turn" between 1 and 1000)
);
--> statement-breakpoint
ALTER TABLE "attempts" ADD CONSTRAINT "attempts_entry_id_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entries"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attempts" ADD CONSTRAINT "attempts_course_book_version" FOREIGN KEY ("course_book_id","course_book_version") REFERENCES "public"."course_book_versions"("course_book_id","version") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "auth_sessions" ADD CONSTRAINT "auth_sessions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cars" ADD CONSTRAINT "cars_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "checkpoint_records" ADD CONSTRAINT "checkpoint_records_result_id_run_results_id_fk" FOREIGN KEY ("result_id") REFERENCES "public"."run_results"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "counting_runs" ADD CONSTRAINT "counting_runs_attempt_id_attempts_id_fk" FOREIGN KEY ("attempt_id") REFERENCES "public"."attempts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "counting_runs" ADD CONSTRAINT "counting_runs_chosen_by_users_id_fk" FOREIGN KEY ("chosen_by") REFERENCES "public"."users"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "counting_runs" ADD CONSTRAINT "counting_runs_of_attempt" FOREIGN KEY ("attempt_id","run_id") REFERENCES "public"."runs"("attempt_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course_book_versions" ADD CONSTRAINT "course_book_versions_course_book_id_course_books_id_fk" FOREIGN KEY ("course_book_id") REFERENCES "public"."course_books"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course_book_versions" ADD CONSTRAINT "course_book_versions_published_by_users_id_fk" FOREIGN KEY ("published_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course_books" ADD CONSTRAINT "course_books_owner_team_id_teams_id_fk" FOREIGN KEY ("owner_team_id") REFERENCES "public"."teams"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "course_books" ADD CONSTRAINT "course_books_event_id_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."events"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crew_zones" ADD CONSTRAINT "crew_zones_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "crew_zones" ADD CONSTRAINT "crew_zones_course_book_id_course_books_id_fk" FOREIGN KEY ("course_book_id") REFERENCES "public"."course_books"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_event_id_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."events"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_own_car" FOREIGN KEY ("car_id","team_id") REFERENCES "public"."cars"("id","team_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_wheels_of_car" FOREIGN KEY ("wheel_setup_id","car_id") REFERENCES "public"."wheel_setups"("id","car_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_class_of_event" FOREIGN KEY ("race_class_id","event_id") REFERENCES "public"."race_classes"("id","event_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_crew" ADD CONSTRAINT "entry_crew_entry" FOREIGN KEY ("entry_id","team_id") REFERENCES "public"."entries"("id","team_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_crew" ADD CONSTRAINT "entry_crew_member" FOREIGN KEY ("team_id","user_id") REFERENCES "public"."memberships"("team_id","user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "event_members" ADD CONSTRAINT "event_members_event_id_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."events"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "event_members" ADD CONSTRAINT "event_members_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_owner_team_id_teams_id_fk" FOREIGN KEY ("owner_team_id") REFERENCES "public"."teams"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_checkpoints" ADD CONSTRAINT "own_checkpoints_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_checkpoints" ADD CONSTRAINT "own_checkpoints_course_book_id_course_books_id_fk" FOREIGN KEY ("course_book_id") REFERENCES "public"."course_books"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "packs" ADD CONSTRAINT "packs_attempt_id_attempts_id_fk" FOREIGN KEY ("attempt_id") REFERENCES "public"."attempts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "race_classes" ADD CONSTRAINT "race_classes_event_id_events_id_fk" FOREIGN KEY ("event_id") REFERENCES "public"."events"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_chunks" ADD CONSTRAINT "run_chunks_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_results" ADD CONSTRAINT "run_results_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_results" ADD CONSTRAINT "run_results_pack_digest_packs_digest_fk" FOREIGN KEY ("pack_digest") REFERENCES "public"."packs"("digest") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_pack_digest_packs_digest_fk" FOREIGN KEY ("pack_digest") REFERENCES "public"."packs"("digest") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_attempt_of_entry" FOREIGN KEY ("attempt_id","entry_id") REFERENCES "public"."attempts"("id","entry_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_grants" ADD CONSTRAINT "upload_grants_entry_id_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entries"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_grants" ADD CONSTRAINT "upload_grants_issued_to_users_id_fk" FOREIGN KEY ("issued_to") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wheel_scales" ADD CONSTRAINT "wheel_scales_wheel_setup_id_wheel_setups_id_fk" FOREIGN KEY ("wheel_setup_id") REFERENCES "public"."wheel_setups"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wheel_scales" ADD CONSTRAINT "wheel_scales_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wheel_setups" ADD CONSTRAINT "wheel_setups_car_id_cars_id_fk" FOREIGN KEY ("car_id") REFERENCES "public"."cars"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "auth_sessions_user_id_idx" ON "auth_sessions" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "auth_sessions_expires_at_idx" ON "auth_sessions" USING btree ("expires_at");--> statement-breakpoint
CREATE INDEX "course_books_owner_team_id_idx" ON "course_books" USING btree ("owner_team_id");--> statement-breakpoint
CREATE INDEX "course_books_event_id_idx" ON "course_books" USING btree ("event_id");--> statement-breakpoint
CREATE INDEX "entries_team_id_idx" ON "entries" USING btree ("team_id");--> statement-breakpoint
CREATE INDEX "entry_crew_member_idx" ON "entry_crew" USING btree ("team_id","user_id");--> statement-breakpoint
CREATE INDEX "event_members_user_id_idx" ON "event_members" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "events_owner_team_id_idx" ON "events" USING btree ("owner_team_id");--> statement-breakpoint
CREATE UNIQUE INDEX "events_one_practice_per_team" ON "events" USING btree ("owner_team_id") WHERE "events"."practice";--> statement-breakpoint
CREATE INDEX "memberships_user_id_idx" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "packs_attempt_id_idx" ON "packs" USING btree ("attempt_id");--> statement-breakpoint
CREATE INDEX "runs_entry_id_made_at_idx" ON "runs" USING btree ("entry_id","made_at" DESC NULLS LAST);--> statement-breakpoint
CREATE INDEX "runs_computing_idx" ON "runs" USING btree ("sealed_at") WHERE "runs"."status" = 'computing';--> statement-breakpoint
CREATE INDEX "sign_in_failures_account_idx" ON "sign_in_failures" USING btree ("account_key","address","failed_at");--> statement-breakpoint
CREATE INDEX "sign_in_failures_address_idx" ON "sign_in_failures" USING btree ("address","failed_at");--> statement-breakpoint
CREATE INDEX "upload_grants_entry_id_idx" ON "upload_grants" USING btree ("entry_id");--> statement-breakpoint
CREATE INDEX "wheel_scales_newest_idx" ON "wheel_scales" USING btree ("wheel_setup_id","recorded_at" DESC NULLS LAST);