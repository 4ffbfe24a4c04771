ALTER TABLE "mail_queue" ADD COLUMN "useful_until" timestamp (3) with time zone;--> statement-breakpoint
UPDATE "mail_queue" SET "body" = '' WHERE "sent_at" IS NOT NULL;
