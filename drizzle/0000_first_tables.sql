CREATE TABLE "one_time_codes" (
	"id" uuid PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"purpose" text NOT NULL,
	"code_hash" text NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"password_hash" text,
	"email_verified_at" timestamp with time zone,
	"is_operator" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" text PRIMARY KEY NOT NULL,
	"person_id" uuid NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"device" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "throttles" (
	"key" text PRIMARY KEY NOT NULL,
	"count" integer NOT NULL,
	"window_ends_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit_entries" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"at" timestamp with time zone NOT NULL,
	"actor_id" uuid,
	"action" text NOT NULL,
	"subject_type" text NOT NULL,
	"subject_id" uuid,
	"tournament_id" uuid,
	"detail" jsonb NOT NULL,
	CONSTRAINT "audit_entries_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"tournament_id" uuid NOT NULL,
	"division_id" uuid NOT NULL,
	"school_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"name" text NOT NULL,
	"state" text NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "teams_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "events" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"tournament_id" uuid NOT NULL,
	"division_id" uuid NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"module_key" text NOT NULL,
	"is_trial" boolean DEFAULT false NOT NULL,
	"room" text DEFAULT '' NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"setup" jsonb,
	"setup_version" integer DEFAULT 0 NOT NULL,
	"setup_locked_at" timestamp with time zone,
	"setup_locked_by" uuid,
	"handed_in_at" timestamp with time zone,
	"handed_in_by" uuid,
	"accepted_at" timestamp with time zone,
	"accepted_by" uuid,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "events_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "addresses" (
	"slug" text PRIMARY KEY NOT NULL,
	"org_id" uuid NOT NULL
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"email" text NOT NULL,
	"role" text NOT NULL,
	"tournament_id" uuid,
	"event_id" uuid,
	"school_id" uuid,
	"token_hash" text NOT NULL,
	"invited_by" uuid NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"accepted_at" timestamp with time zone,
	"accepted_by" uuid,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "invitations_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"role" text NOT NULL,
	"tournament_id" uuid,
	"event_id" uuid,
	"school_id" uuid,
	"state" text DEFAULT 'active' NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "memberships_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "organizations" (
	"org_id" uuid PRIMARY KEY NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"time_zone" text NOT NULL,
	"currency" text NOT NULL,
	"contact" text DEFAULT '' NOT NULL,
	"is_demo" boolean DEFAULT false NOT NULL,
	"suspended_at" timestamp with time zone,
	"created_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "releases" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"tournament_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"public_line" text DEFAULT '' NOT NULL,
	"snapshot" jsonb NOT NULL,
	"released_at" timestamp with time zone NOT NULL,
	"released_by" uuid NOT NULL,
	"public_from" timestamp with time zone NOT NULL,
	CONSTRAINT "releases_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "schools" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"town" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "schools_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "kept_requests" (
	"org_id" uuid NOT NULL,
	"key" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"request_hash" text NOT NULL,
	"answer" jsonb NOT NULL,
	"at" timestamp with time zone NOT NULL,
	CONSTRAINT "kept_requests_pkey" PRIMARY KEY("org_id","key")
);
--> statement-breakpoint
CREATE TABLE "reading_revisions" (
	"org_id" uuid NOT NULL,
	"event_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"part" text NOT NULL,
	"version" integer NOT NULL,
	"value" jsonb NOT NULL,
	"reason" text DEFAULT '' NOT NULL,
	"kept_at" timestamp with time zone NOT NULL,
	"kept_by" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"device_sequence" bigint NOT NULL,
	CONSTRAINT "reading_revisions_pkey" PRIMARY KEY("org_id","event_id","team_id","part","version")
);
--> statement-breakpoint
CREATE TABLE "readings" (
	"org_id" uuid NOT NULL,
	"event_id" uuid NOT NULL,
	"team_id" uuid NOT NULL,
	"part" text NOT NULL,
	"version" integer NOT NULL,
	"value" jsonb NOT NULL,
	"state" text DEFAULT 'kept' NOT NULL,
	"kept_at" timestamp with time zone NOT NULL,
	"kept_by" uuid NOT NULL,
	CONSTRAINT "readings_pkey" PRIMARY KEY("org_id","event_id","team_id","part")
);
--> statement-breakpoint
CREATE TABLE "settlements" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"event_id" uuid NOT NULL,
	"team_id" uuid,
	"kind" text NOT NULL,
	"fingerprint" text NOT NULL,
	"outcome" text NOT NULL,
	"reason" text NOT NULL,
	"settled_at" timestamp with time zone NOT NULL,
	"settled_by" uuid NOT NULL,
	CONSTRAINT "settlements_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "divisions" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"tournament_id" uuid NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"letter" text NOT NULL,
	"shape" text NOT NULL,
	"position" integer NOT NULL,
	CONSTRAINT "divisions_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
CREATE TABLE "tournaments" (
	"org_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"slug" text NOT NULL,
	"short_name" text NOT NULL,
	"name" text NOT NULL,
	"day" date NOT NULL,
	"starts_at" text NOT NULL,
	"ends_at" text NOT NULL,
	"venue" text DEFAULT '' NOT NULL,
	"venue_note" text DEFAULT '' NOT NULL,
	"summary" text DEFAULT '' NOT NULL,
	"day_plan" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"is_published" boolean DEFAULT false NOT NULL,
	"drop_worst" integer DEFAULT 0 NOT NULL,
	"advance" integer DEFAULT 0 NOT NULL,
	"per_school" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	CONSTRAINT "tournaments_pkey" PRIMARY KEY("org_id","id")
);
--> statement-breakpoint
ALTER TABLE "one_time_codes" ADD CONSTRAINT "one_time_codes_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "teams" ADD CONSTRAINT "teams_tournament_fk" FOREIGN KEY ("org_id","tournament_id") REFERENCES "public"."tournaments"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "teams" ADD CONSTRAINT "teams_division_fk" FOREIGN KEY ("org_id","division_id") REFERENCES "public"."divisions"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "teams" ADD CONSTRAINT "teams_school_fk" FOREIGN KEY ("org_id","school_id") REFERENCES "public"."schools"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_tournament_fk" FOREIGN KEY ("org_id","tournament_id") REFERENCES "public"."tournaments"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_division_fk" FOREIGN KEY ("org_id","division_id") REFERENCES "public"."divisions"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "releases" ADD CONSTRAINT "releases_tournament_fk" FOREIGN KEY ("org_id","tournament_id") REFERENCES "public"."tournaments"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "schools" ADD CONSTRAINT "schools_org_id_organizations_org_id_fk" FOREIGN KEY ("org_id") REFERENCES "public"."organizations"("org_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_event_fk" FOREIGN KEY ("org_id","event_id") REFERENCES "public"."events"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_team_fk" FOREIGN KEY ("org_id","team_id") REFERENCES "public"."teams"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "settlements" ADD CONSTRAINT "settlements_event_fk" FOREIGN KEY ("org_id","event_id") REFERENCES "public"."events"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "divisions" ADD CONSTRAINT "divisions_tournament" FOREIGN KEY ("org_id","tournament_id") REFERENCES "public"."tournaments"("org_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tournaments" ADD CONSTRAINT "tournaments_org_id_organizations_org_id_fk" FOREIGN KEY ("org_id") REFERENCES "public"."organizations"("org_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "one_time_codes_hash_key" ON "one_time_codes" USING btree ("code_hash");--> statement-breakpoint
CREATE INDEX "one_time_codes_person" ON "one_time_codes" USING btree ("person_id");--> statement-breakpoint
CREATE UNIQUE INDEX "people_email_key" ON "people" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "sessions_person" ON "sessions" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "audit_entries_at" ON "audit_entries" USING btree ("org_id","at");--> statement-breakpoint
CREATE UNIQUE INDEX "teams_number_key" ON "teams" USING btree ("org_id","division_id","number");--> statement-breakpoint
CREATE INDEX "teams_school" ON "teams" USING btree ("org_id","school_id");--> statement-breakpoint
CREATE INDEX "teams_tournament" ON "teams" USING btree ("org_id","tournament_id");--> statement-breakpoint
CREATE UNIQUE INDEX "events_slug_key" ON "events" USING btree ("org_id","tournament_id","slug");--> statement-breakpoint
CREATE UNIQUE INDEX "events_name_key" ON "events" USING btree ("org_id","division_id","name");--> statement-breakpoint
CREATE INDEX "events_tournament" ON "events" USING btree ("org_id","tournament_id");--> statement-breakpoint
CREATE UNIQUE INDEX "invitations_token_key" ON "invitations" USING btree ("org_id","token_hash");--> statement-breakpoint
CREATE INDEX "invitations_email" ON "invitations" USING btree ("org_id",lower("email"));--> statement-breakpoint
CREATE UNIQUE INDEX "memberships_grant_key" ON "memberships" USING btree ("org_id","person_id","role",coalesce("tournament_id", '00000000-0000-0000-0000-000000000000'),coalesce("event_id", '00000000-0000-0000-0000-000000000000'),coalesce("school_id", '00000000-0000-0000-0000-000000000000'));--> statement-breakpoint
CREATE INDEX "memberships_person" ON "memberships" USING btree ("person_id");--> statement-breakpoint
CREATE UNIQUE INDEX "releases_number_key" ON "releases" USING btree ("org_id","tournament_id","number");--> statement-breakpoint
CREATE UNIQUE INDEX "schools_name_key" ON "schools" USING btree ("org_id",lower("name"));--> statement-breakpoint
CREATE UNIQUE INDEX "settlements_finding_key" ON "settlements" USING btree ("org_id","event_id","kind","fingerprint");--> statement-breakpoint
CREATE UNIQUE INDEX "divisions_slug_key" ON "divisions" USING btree ("org_id","tournament_id","slug");--> statement-breakpoint
CREATE UNIQUE INDEX "divisions_letter_key" ON "divisions" USING btree ("org_id","tournament_id","letter");--> statement-breakpoint
CREATE UNIQUE INDEX "tournaments_slug_key" ON "tournaments" USING btree ("org_id","slug");