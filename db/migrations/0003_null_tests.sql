ALTER TABLE "comparisons" DROP CONSTRAINT "comparisons_question";--> statement-breakpoint
ALTER TABLE "comparisons" ADD COLUMN "null_test_road_day_id" uuid;--> statement-breakpoint
ALTER TABLE "road_days" ADD COLUMN "null_test_revision_id" uuid;--> statement-breakpoint
ALTER TABLE "road_days" ADD COLUMN "null_test_rewrites" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "road_days" ADD COLUMN "planned_twins" integer;--> statement-breakpoint
ALTER TABLE "runs" ADD COLUMN "letter" text;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_workspace_id_null_test_road_day_id_road_days_workspace_id_id_fk" FOREIGN KEY ("workspace_id","null_test_road_day_id") REFERENCES "public"."road_days"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "road_days" ADD CONSTRAINT "road_days_workspace_id_null_test_revision_id_revisions_workspace_id_id_fk" FOREIGN KEY ("workspace_id","null_test_revision_id") REFERENCES "public"."revisions"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_question" UNIQUE NULLS NOT DISTINCT("revision_a_id","revision_b_id","null_test_road_day_id","settings_sha256");--> statement-breakpoint
ALTER TABLE "comparisons" ADD CONSTRAINT "comparisons_two_sides" CHECK (("comparisons"."revision_a_id" = "comparisons"."revision_b_id") = ("comparisons"."null_test_road_day_id" is not null));