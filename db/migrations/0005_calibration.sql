CREATE TYPE "public"."calibration_setting" AS ENUM('relevance_marks', 'axis_links', 'checksum_regions');--> statement-breakpoint
CREATE TYPE "public"."compute_state" AS ENUM('computing', 'ready', 'failed');--> statement-breakpoint
CREATE TYPE "public"."description_state" AS ENUM('reading', 'read', 'refused');--> statement-breakpoint
ALTER TYPE "public"."upload_purpose" ADD VALUE 'description';--> statement-breakpoint
CREATE TABLE "calibration_settings" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"kind" "calibration_setting" NOT NULL,
	"version" integer NOT NULL,
	"content" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "calibration_settings_version" UNIQUE("programme_id","kind","version")
);
--> statement-breakpoint
CREATE TABLE "change_sets" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"revision_a_id" uuid NOT NULL,
	"revision_b_id" uuid NOT NULL,
	"input_sha256" text NOT NULL,
	"reader_version" text NOT NULL,
	"state" "compute_state" DEFAULT 'computing' NOT NULL,
	"failure" text,
	"result" jsonb,
	"result_sha256" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "change_sets_input" UNIQUE("revision_a_id","revision_b_id","input_sha256"),
	CONSTRAINT "change_sets_tenant" UNIQUE("workspace_id","id"),
	CONSTRAINT "change_sets_two_sides" CHECK ("change_sets"."revision_a_id" <> "change_sets"."revision_b_id"),
	CONSTRAINT "change_sets_ready" CHECK (("change_sets"."state" = 'ready') = ("change_sets"."result" is not null))
);
--> statement-breakpoint
CREATE TABLE "coverages" (
	"workspace_id" uuid NOT NULL,
	"change_set_id" uuid NOT NULL,
	"input_sha256" text NOT NULL,
	"state" "compute_state" DEFAULT 'computing' NOT NULL,
	"failure" text,
	"result" jsonb,
	"result_sha256" text,
	"columns" jsonb,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "coverages_change_set_id_input_sha256_pk" PRIMARY KEY("change_set_id","input_sha256"),
	CONSTRAINT "coverages_ready" CHECK (("coverages"."state" = 'ready') = ("coverages"."result" is not null))
);
--> statement-breakpoint
CREATE TABLE "image_checks" (
	"workspace_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"regions_version" integer NOT NULL,
	"result" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "image_checks_revision_id_regions_version_pk" PRIMARY KEY("revision_id","regions_version")
);
--> statement-breakpoint
CREATE TABLE "image_readings" (
	"workspace_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"description_id" uuid NOT NULL,
	"reader_version" text NOT NULL,
	"blob_sha256" text NOT NULL,
	"summary" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "image_readings_revision_id_description_id_reader_version_pk" PRIMARY KEY("revision_id","description_id","reader_version")
);
--> statement-breakpoint
CREATE TABLE "looked_at" (
	"workspace_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"digest" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "looked_at_user_id_revision_id_digest_pk" PRIMARY KEY("user_id","revision_id","digest")
);
--> statement-breakpoint
CREATE TABLE "second_agreements" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"revision_id" uuid NOT NULL,
	"change_set_id" uuid NOT NULL,
	"seen_sha256" text NOT NULL,
	"lead_id" uuid NOT NULL,
	"lead_name" text NOT NULL,
	"reason" text NOT NULL,
	"reauth_method" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "second_agreements_once" UNIQUE("revision_id","seen_sha256","lead_id"),
	CONSTRAINT "second_agreements_reason" CHECK (btrim("second_agreements"."reason") <> '')
);
--> statement-breakpoint
CREATE TABLE "descriptions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"programme_id" uuid NOT NULL,
	"sha256" text NOT NULL,
	"files" jsonb NOT NULL,
	"state" "description_state" DEFAULT 'reading' NOT NULL,
	"reader_version" text,
	"summary" jsonb,
	"failure" text,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "descriptions_content" UNIQUE("programme_id","sha256"),
	CONSTRAINT "descriptions_tenant" UNIQUE("workspace_id","programme_id","id"),
	CONSTRAINT "descriptions_digest" CHECK ("descriptions"."sha256" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "descriptions_refused_with_reason" CHECK (("descriptions"."state" = 'refused') = ("descriptions"."failure" is not null))
);
--> statement-breakpoint
ALTER TABLE "revisions" ADD COLUMN "description_id" uuid;--> statement-breakpoint
ALTER TABLE "calibration_settings" ADD CONSTRAINT "calibration_settings_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "calibration_settings" ADD CONSTRAINT "calibration_settings_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "calibration_settings" ADD CONSTRAINT "calibration_settings_workspace_id_programme_id_programmes_workspace_id_id_fk" FOREIGN KEY ("workspace_id","programme_id") REFERENCES "public"."programmes"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "change_sets" ADD CONSTRAINT "change_sets_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "change_sets" ADD CONSTRAINT "change_sets_workspace_id_revision_a_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_a_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "change_sets" ADD CONSTRAINT "change_sets_workspace_id_revision_b_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_b_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coverages" ADD CONSTRAINT "coverages_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "coverages" ADD CONSTRAINT "coverages_workspace_id_change_set_id_change_sets_workspace_id_id_fk" FOREIGN KEY ("workspace_id","change_set_id") REFERENCES "public"."change_sets"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_checks" ADD CONSTRAINT "image_checks_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_checks" ADD CONSTRAINT "image_checks_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_readings" ADD CONSTRAINT "image_readings_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_readings" ADD CONSTRAINT "image_readings_description_id_descriptions_id_fk" FOREIGN KEY ("description_id") REFERENCES "public"."descriptions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_readings" ADD CONSTRAINT "image_readings_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "image_readings" ADD CONSTRAINT "image_readings_workspace_id_blob_sha256_blobs_workspace_id_sha256_fk" FOREIGN KEY ("workspace_id","blob_sha256") REFERENCES "public"."blobs"("workspace_id","sha256") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "looked_at" ADD CONSTRAINT "looked_at_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "looked_at" ADD CONSTRAINT "looked_at_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "looked_at" ADD CONSTRAINT "looked_at_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "second_agreements" ADD CONSTRAINT "second_agreements_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "second_agreements" ADD CONSTRAINT "second_agreements_lead_id_users_id_fk" FOREIGN KEY ("lead_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "second_agreements" ADD CONSTRAINT "second_agreements_workspace_id_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "second_agreements" ADD CONSTRAINT "second_agreements_workspace_id_change_set_id_change_sets_workspace_id_id_fk" FOREIGN KEY ("workspace_id","change_set_id") REFERENCES "public"."change_sets"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "descriptions" ADD CONSTRAINT "descriptions_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "descriptions" ADD CONSTRAINT "descriptions_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "descriptions" ADD CONSTRAINT "descriptions_workspace_id_programme_id_programmes_workspace_id_id_fk" FOREIGN KEY ("workspace_id","programme_id") REFERENCES "public"."programmes"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "change_sets_of_b" ON "change_sets" USING btree ("revision_b_id");--> statement-breakpoint
ALTER TABLE "revisions" ADD CONSTRAINT "revisions_description" FOREIGN KEY ("workspace_id","programme_id","description_id") REFERENCES "public"."descriptions"("workspace_id","programme_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE TRIGGER calibration_settings_append_only BEFORE UPDATE OR DELETE ON calibration_settings FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER second_agreements_append_only BEFORE UPDATE OR DELETE ON second_agreements FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER descriptions_stay BEFORE DELETE ON descriptions FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE FUNCTION keep_description_identity() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (NEW.id, NEW.workspace_id, NEW.programme_id, NEW.sha256, NEW.files, NEW.created_by, NEW.created_at)
     IS DISTINCT FROM
     (OLD.id, OLD.workspace_id, OLD.programme_id, OLD.sha256, OLD.files, OLD.created_by, OLD.created_at) THEN
    RAISE EXCEPTION 'a description''s files never change' USING ERRCODE = '42501';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER descriptions_keep_identity BEFORE UPDATE ON descriptions FOR EACH ROW EXECUTE FUNCTION keep_description_identity();
--> statement-breakpoint
-- Another description may replace one while nothing was driven or decided; later one can only be added where there is none.
CREATE FUNCTION keep_revision_description() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF OLD.description_id IS NOT NULL AND OLD.state <> 'draft' AND NEW.description_id IS DISTINCT FROM OLD.description_id THEN
    RAISE EXCEPTION 'a revision''s description is fixed once it is no draft' USING ERRCODE = '42501';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER revisions_keep_description BEFORE UPDATE ON revisions FOR EACH ROW EXECUTE FUNCTION keep_revision_description();
