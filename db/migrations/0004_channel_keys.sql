CREATE TABLE "channel_keys" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"workspace_id" uuid NOT NULL,
	"header_sha256" text NOT NULL,
	"format" text NOT NULL,
	"name" text NOT NULL,
	"version" integer NOT NULL,
	"key" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "channel_keys_tenant" UNIQUE("workspace_id","id"),
	CONSTRAINT "channel_keys_version" UNIQUE("workspace_id","header_sha256","version"),
	CONSTRAINT "channel_keys_header" CHECK ("channel_keys"."header_sha256" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
ALTER TABLE "runs" ADD COLUMN "header_sha256" text;--> statement-breakpoint
ALTER TABLE "runs" ADD COLUMN "channel_key_id" uuid;--> statement-breakpoint
ALTER TABLE "channel_keys" ADD CONSTRAINT "channel_keys_workspace_id_workspaces_id_fk" FOREIGN KEY ("workspace_id") REFERENCES "public"."workspaces"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "channel_keys" ADD CONSTRAINT "channel_keys_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_workspace_id_channel_key_id_channel_keys_workspace_id_id_fk" FOREIGN KEY ("workspace_id","channel_key_id") REFERENCES "public"."channel_keys"("workspace_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE TRIGGER channel_keys_append_only BEFORE UPDATE OR DELETE ON channel_keys FOR EACH ROW EXECUTE FUNCTION refuse_change();
