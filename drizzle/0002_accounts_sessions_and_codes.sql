ALTER TABLE "one_time_codes" ADD COLUMN "email" text;--> statement-breakpoint
ALTER TABLE "one_time_codes" ADD COLUMN "goes_to" text DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE "sessions" ADD COLUMN "last_used_at" timestamp with time zone DEFAULT now() NOT NULL;