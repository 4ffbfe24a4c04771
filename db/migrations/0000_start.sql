CREATE TYPE "public"."upload_purpose" AS ENUM('image', 'log');--> statement-breakpoint
CREATE TYPE "public"."upload_state" AS ENUM('open', 'complete', 'used', 'cancelled');--> statement-breakpoint
CREATE TYPE "public"."comparison_state" AS ENUM('waiting', 'ready', 'failed');--> statement-breakpoint
CREATE TYPE "public"."decision_kind" AS ENUM('as_found', 'promote', 'hold', 'turn_down', 'roll_back');--> statement-breakpoint
CREATE TYPE "public"."intended_use" AS ENUM('road', 'closed_course', 'bench');--> statement-breakpoint
CREATE TYPE "public"."revision_state" AS ENUM('draft', 'validating', 'in_review', 'promoted', 'superseded', 'turned_down', 'withdrawn', 'rolled_back');--> statement-breakpoint
CREATE TYPE "public"."leg" AS ENUM('out', 'back');--> statement-breakpoint
CREATE TYPE "public"."run_kind" AS ENUM('pull', 'coast-down', 'sprint');--> statement-breakpoint
CREATE TYPE "public"."run_state" AS ENUM('waiting', 'usable', 'refused');--> statement-breakpoint
CREATE TYPE "public"."role" AS ENUM('reader', 'tester', 'calibrator', 'lead', 'admin');--> statement-breakpoint
CREATE TABLE "blobs" (
	"workspace_id" uuid NOT NULL,
	"sha256" text NOT NULL,
	"size_bytes" bigint NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "blobs_workspace_id_sha256_pk" PRIMARY KEY("workspace_id","sha256"),
	CONSTRAINT "blobs_digest" CHECK ("blobs"."sha256" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "idempotency_keys" (
	"user_id" uuid NOT NULL,
	"key" text NOT NULL,
	"request_sha256" text NOT NULL,
	"status" integer NOT NULL,
	"body" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_keys_user_id_key_pk" PRIMARY KEY("user_id","key")
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"purpose" "upload_purpose" NOT NULL,
	"file_name" text NOT NULL,
	"declared_bytes" bigint NOT NULL,
	"declared_sha256" text NOT NULL,
	"staging_key" text NOT NULL,
	"received_bytes" bigint DEFAULT 0 NOT NULL,
	"state" "upload_state" DEFAULT 'open' NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "comparison_results" (
	"comparison_id" uuid NOT NULL,
	"input_sha256" text NOT NULL,
	"workspace_id" uuid NOT NULL,
	"analysis_version" text NOT NULL,
	"sheet_version" integer NOT NULL,
	"state" "comparison_state" DEFAULT 'waiting' NOT NULL,
	"input" jsonb NOT NULL,
	"result" jsonb,
	"failure" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "comparison_results_comparison_id_input_sha256_pk" PRIMARY KEY("comparison_id","input_sha256")
);
--> statement-breakpoint
CREATE TABLE "comparisons" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"revision_a_id" uuid NOT NULL,
	"revision_b_id" uuid NOT NULL,
	"settings" jsonb NOT NULL,
	"settings_sha256" text NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "comparisons_question" UNIQUE("revision_a_id","revision_b_id","settings_sha256"),
	CONSTRAINT "comparisons_tenant" UNIQUE("workspace_id","id")
);
--> statement-breakpoint
CREATE TABLE "decisions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"from_revision_id" uuid,
	"kind" "decision_kind" NOT NULL,
	"record_number" integer NOT NULL,
	"reason" text NOT NULL,
	"meaning" text NOT NULL,
	"decider_id" uuid NOT NULL,
	"decider_name" text NOT NULL,
	"author_id" uuid NOT NULL,
	"submitter_id" uuid,
	"self_released" boolean DEFAULT false NOT NULL,
	"reauth_method" text NOT NULL,
	"evidence" jsonb NOT NULL,
	"record_sha256" text NOT NULL,
	"previous_record_sha256" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "decisions_record_number" UNIQUE("workspace_id","record_number"),
	CONSTRAINT "decisions_reason" CHECK (btrim("decisions"."reason") <> ''),
	CONSTRAINT "decisions_digest" CHECK ("decisions"."record_sha256" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "decisions_not_own" CHECK ("decisions"."kind" in ('roll_back','as_found') or "decisions"."self_released" or ("decisions"."decider_id" <> "decisions"."author_id" and "decisions"."decider_id" is distinct from "decisions"."submitter_id"))
);
--> statement-breakpoint
CREATE TABLE "waivers" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"decision_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"gate_id" text NOT NULL,
	"gate_state" text NOT NULL,
	"reason" text NOT NULL,
	"waived_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "waivers_once" UNIQUE("decision_id","gate_id"),
	CONSTRAINT "waivers_reason" CHECK (length(btrim("waivers"."reason")) >= 20)
);
--> statement-breakpoint
CREATE TABLE "ledger" (
	"workspace_id" uuid NOT NULL,
	"seq" bigint NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"actor_id" uuid,
	"actor_name" text NOT NULL,
	"event" text NOT NULL,
	"subject_type" text NOT NULL,
	"subject_id" uuid,
	"programme_id" uuid,
	"data" jsonb NOT NULL,
	"request_id" text,
	"previous_sha256" text NOT NULL,
	"sha256" text NOT NULL,
	CONSTRAINT "ledger_workspace_id_seq_pk" PRIMARY KEY("workspace_id","seq"),
	CONSTRAINT "ledger_digest" UNIQUE("workspace_id","sha256"),
	CONSTRAINT "ledger_sha256" CHECK ("ledger"."sha256" ~ '^[0-9a-f]{64}$' and "ledger"."previous_sha256" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "ledger_heads" (
	"workspace_id" uuid PRIMARY KEY NOT NULL,
	"seq" bigint NOT NULL,
	"sha256" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "mail_queue" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid,
	"to_address" text NOT NULL,
	"subject" text NOT NULL,
	"body" text NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_try_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"bucket" text PRIMARY KEY NOT NULL,
	"window_start" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"count" integer DEFAULT 0 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"session_token" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"expires" timestamp (3) with time zone NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"active_workspace_id" uuid
);
--> statement-breakpoint
CREATE TABLE "signing_passphrases" (
	"user_id" uuid PRIMARY KEY NOT NULL,
	"scrypt_hash" text NOT NULL,
	"failed_tries" integer DEFAULT 0 NOT NULL,
	"locked_until" timestamp (3) with time zone,
	"set_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text,
	"email" text NOT NULL,
	"email_verified" timestamp (3) with time zone,
	"image" text,
	"sample" boolean DEFAULT false NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "verification_tokens" (
	"identifier" text NOT NULL,
	"token" text NOT NULL,
	"expires" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "verification_tokens_identifier_token_pk" PRIMARY KEY("identifier","token")
);
--> statement-breakpoint
CREATE TABLE "gate_plans" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"plan" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "gate_plans_version" UNIQUE("programme_id","version")
);
--> statement-breakpoint
CREATE TABLE "programme_shares" (
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"expires_on" date NOT NULL,
	"shared_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "programme_shares_programme_id_user_id_pk" PRIMARY KEY("programme_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "programmes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"name" text NOT NULL,
	"goal" text DEFAULT '' NOT NULL,
	"sample" boolean DEFAULT false NOT NULL,
	"standing_revision_id" uuid,
	"next_revision_number" integer DEFAULT 1 NOT NULL,
	"row_version" integer DEFAULT 1 NOT NULL,
	"archived_at" timestamp (3) with time zone,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "programmes_tenant" UNIQUE("workspace_id","id")
);
--> statement-breakpoint
CREATE TABLE "vehicle_sheets" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"figures" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "vehicle_sheets_version" UNIQUE("programme_id","version")
);
--> statement-breakpoint
CREATE TABLE "revisions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"parent_id" uuid,
	"state" "revision_state" DEFAULT 'draft' NOT NULL,
	"title" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"change_reason" text DEFAULT '' NOT NULL,
	"intended_use" "intended_use",
	"touches_emission_or_safety" boolean,
	"as_found" boolean DEFAULT false NOT NULL,
	"how_read" text,
	"image_sha256" text NOT NULL,
	"image_file_name" text NOT NULL,
	"image_bytes" bigint NOT NULL,
	"image_base_address" bigint,
	"image_summary" jsonb NOT NULL,
	"author_id" uuid NOT NULL,
	"submitter_id" uuid,
	"submitted_at" timestamp (3) with time zone,
	"gate_plan_version" integer,
	"stood_from" timestamp (3) with time zone,
	"stood_until" timestamp (3) with time zone,
	"set_aside_at" timestamp (3) with time zone,
	"set_aside_reason" text,
	"barred_at" timestamp (3) with time zone,
	"barred_reason" text,
	"row_version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "revisions_number" UNIQUE("programme_id","number"),
	CONSTRAINT "revisions_tenant" UNIQUE("workspace_id","id"),
	CONSTRAINT "revisions_stated_before_validating" CHECK ("revisions"."state" in ('draft','withdrawn') or "revisions"."as_found" or (btrim("revisions"."change_reason") <> '' and "revisions"."intended_use" is not null and "revisions"."touches_emission_or_safety" is not null))
);
--> statement-breakpoint
CREATE TABLE "road_days" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"day" date NOT NULL,
	"zone" text NOT NULL,
	"strip_name" text NOT NULL,
	"strip_length_m" real,
	"driver" text NOT NULL,
	"recorder" text NOT NULL,
	"temp_c" real NOT NULL,
	"pressure_hpa" real NOT NULL,
	"humidity_pct" real NOT NULL,
	"wind_note" text DEFAULT '' NOT NULL,
	"fuel_note" text DEFAULT '' NOT NULL,
	"tyre_pressure_front_kpa" real,
	"tyre_pressure_rear_kpa" real,
	"mass_kg" real,
	"checklist" jsonb NOT NULL,
	"sample" boolean DEFAULT false NOT NULL,
	"row_version" integer DEFAULT 1 NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "road_days_tenant" UNIQUE("workspace_id","id")
);
--> statement-breakpoint
CREATE TABLE "run_analyses" (
	"run_id" uuid NOT NULL,
	"input_sha256" text NOT NULL,
	"workspace_id" uuid NOT NULL,
	"analysis_version" text NOT NULL,
	"sheet_version" integer NOT NULL,
	"result" jsonb NOT NULL,
	"traces" jsonb,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "run_analyses_run_id_input_sha256_pk" PRIMARY KEY("run_id","input_sha256")
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"road_day_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"kind" "run_kind" NOT NULL,
	"leg" "leg" NOT NULL,
	"drive_order" integer NOT NULL,
	"gear" integer,
	"started_at" timestamp (3) with time zone,
	"temp_c" real NOT NULL,
	"pressure_hpa" real NOT NULL,
	"humidity_pct" real NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"log_sha256" text NOT NULL,
	"log_file_name" text NOT NULL,
	"log_bytes" bigint NOT NULL,
	"state" "run_state" DEFAULT 'waiting' NOT NULL,
	"set_aside_at" timestamp (3) with time zone,
	"set_aside_by" uuid,
	"set_aside_reason" text,
	"result_was_visible" boolean,
	"sample" boolean DEFAULT false NOT NULL,
	"row_version" integer DEFAULT 1 NOT NULL,
	"tester_id" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "runs_number" UNIQUE("workspace_id","number"),
	CONSTRAINT "runs_tenant" UNIQUE("workspace_id","id")
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"email" text NOT NULL,
	"roles" "role"[] NOT NULL,
	"token_sha256" text NOT NULL,
	"invited_by" uuid NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"accepted_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"workspace_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"roles" "role"[] NOT NULL,
	"disabled_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_workspace_id_user_id_pk" PRIMARY KEY("workspace_id","user_id"),
	CONSTRAINT "memberships_some_role" CHECK (cardinality("memberships"."roles") > 0)
);
--> statement-breakpoint
CREATE TABLE "workspaces" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"sample" boolean DEFAULT false NOT NULL,
	"next_run_number" integer DEFAULT 1 NOT NULL,
	"next_record_number" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "blobs" ADD CONSTRAINT "blobs_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "idempotency_keys" ADD CONSTRAINT "idempotency_keys_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparison_results" ADD CONSTRAINT "comparison_results_comparison_id_comparisons_id_fk" FOREIGN KEY ("comparison_id") REFERENCES "public"."comparisons"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparison_results" ADD CONSTRAINT "comparison_results_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_workspace_id_revision_a_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_a_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_workspace_id_revision_b_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_b_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_decider_id_users_id_fk" FOREIGN KEY ("decider_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_submitter_id_users_id_fk" FOREIGN KEY ("submitter_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_workspace_id_programme_id_programmes_workspace_id_id_fk" FOREIGN KEY ("workspace_id","programme_id") REFERENCES "public"."programmes"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "decisions" ADD CONSTRAINT "decisions_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "waivers" ADD CONSTRAINT "waivers_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "waivers" ADD CONSTRAINT "waivers_decision_id_decisions_id_fk" FOREIGN KEY ("decision_id") REFERENCES "public"."decisions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "waivers" ADD CONSTRAINT "waivers_waived_by_users_id_fk" FOREIGN KEY ("waived_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger" ADD CONSTRAINT "ledger_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger" ADD CONSTRAINT "ledger_actor_id_users_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_heads" ADD CONSTRAINT "ledger_heads_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail_queue" ADD CONSTRAINT "mail_queue_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signing_passphrases" ADD CONSTRAINT "signing_passphrases_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "gate_plans" ADD CONSTRAINT "gate_plans_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "gate_plans" ADD CONSTRAINT "gate_plans_programme_id_programmes_id_fk" FOREIGN KEY ("programme_id") REFERENCES "public"."programmes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "gate_plans" ADD CONSTRAINT "gate_plans_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_shares" ADD CONSTRAINT "programme_shares_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_shares" ADD CONSTRAINT "programme_shares_programme_id_programmes_id_fk" FOREIGN KEY ("programme_id") REFERENCES "public"."programmes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_shares" ADD CONSTRAINT "programme_shares_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programme_shares" ADD CONSTRAINT "programme_shares_shared_by_users_id_fk" FOREIGN KEY ("shared_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programmes" ADD CONSTRAINT "programmes_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "programmes" ADD CONSTRAINT "programmes_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "vehicle_sheets" ADD CONSTRAINT "vehicle_sheets_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "vehicle_sheets" ADD CONSTRAINT "vehicle_sheets_programme_id_programmes_id_fk" FOREIGN KEY ("programme_id") REFERENCES "public"."programmes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "vehicle_sheets" ADD CONSTRAINT "vehicle_sheets_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_submitter_id_users_id_fk" FOREIGN KEY ("submitter_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_workspace_id_programme_id_programmes_workspace_id_id_fk" FOREIGN KEY ("workspace_id","programme_id") REFERENCES "public"."programmes"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_workspace_id_image_sha256_blobs_workspace_id_sha256_fk" FOREIGN KEY ("workspace_id","image_sha256") REFERENCES "public"."blobs"("workspace_id","sha256") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_workspace_id_parent_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","parent_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "road_days" ADD CONSTRAINT "road_days_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "road_days" ADD CONSTRAINT "road_days_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "road_days" ADD CONSTRAINT "road_days_workspace_id_programme_id_programmes_workspace_id_id_fk" FOREIGN KEY ("workspace_id","programme_id") REFERENCES "public"."programmes"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_analyses" ADD CONSTRAINT "run_analyses_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_analyses" ADD CONSTRAINT "run_analyses_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_set_aside_by_users_id_fk" FOREIGN KEY ("set_aside_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_tester_id_users_id_fk" FOREIGN KEY ("tester_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_workspace_id_road_day_id_road_days_workspace_id_id_fk" FOREIGN KEY ("workspace_id","road_day_id") REFERENCES "public"."road_days"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_workspace_id_log_sha256_blobs_workspace_id_sha256_fk" FOREIGN KEY ("workspace_id","log_sha256") REFERENCES "public"."blobs"("workspace_id","sha256") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_invited_by_users_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "uploads_state" ON "uploads" USING btree ("state","expires_at");--> statement-breakpoint
CREATE UNIQUE INDEX "decisions_promoted_once" ON "decisions" USING btree ("revision_id") WHERE "decisions"."kind" = 'promote';--> statement-breakpoint
CREATE INDEX "ledger_by_programme" ON "ledger" USING btree ("workspace_id","programme_id","seq");--> statement-breakpoint
CREATE INDEX "ledger_by_subject" ON "ledger" USING btree ("workspace_id","subject_type","subject_id","seq");--> statement-breakpoint
CREATE INDEX "mail_queue_due" ON "mail_queue" USING btree ("next_try_at") WHERE "mail_queue"."sent_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "users_email" ON "users" USING btree (lower("email"));--> statement-breakpoint
CREATE UNIQUE INDEX "revisions_one_stands" ON "revisions" USING btree ("programme_id") WHERE "revisions"."state" = 'promoted';--> statement-breakpoint
CREATE UNIQUE INDEX "runs_same_log_once" ON "runs" USING btree ("programme_id","log_sha256") WHERE "runs"."set_aside_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "runs_one_place_in_order" ON "runs" USING btree ("road_day_id","drive_order") WHERE "runs"."set_aside_at" is null;--> statement-breakpoint
CREATE INDEX "runs_by_revision" ON "runs" USING btree ("programme_id","revision_id");--> statement-breakpoint
CREATE UNIQUE INDEX "invitations_token" ON "invitations" USING btree ("token_sha256");