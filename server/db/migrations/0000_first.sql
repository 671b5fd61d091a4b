CREATE TABLE "events" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"studio_id" uuid,
	"user_id" uuid,
	"kind" varchar(60) NOT NULL,
	"record_id" uuid,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"studio_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" varchar(20) NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_studio_id_user_id_pk" PRIMARY KEY("studio_id","user_id"),
	CONSTRAINT "memberships_role" CHECK ("memberships"."role" in ('member', 'technician', 'owner'))
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"key" varchar(100) NOT NULL,
	"window_start" timestamp with time zone NOT NULL,
	"count" integer NOT NULL,
	CONSTRAINT "rate_limits_key_window_start_pk" PRIMARY KEY("key","window_start")
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"fresh_at" timestamp with time zone NOT NULL,
	"last_seen_at" timestamp with time zone NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "studios" (
	"id" uuid PRIMARY KEY NOT NULL,
	"slug" varchar(80) NOT NULL,
	"name" varchar(120) NOT NULL,
	"max_bytes" bigint NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "studios_slug_unique" UNIQUE("slug")
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" varchar(120) NOT NULL,
	"email" varchar(254) NOT NULL,
	"password_hash" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "films" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "films_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "inkjets" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "inkjets_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "lamps" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "lamps_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "papers" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "papers_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "scanners" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "scanners_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "sensitizers" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "sensitizers_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "base_exposures" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"value" double precision NOT NULL,
	"unit" varchar(8) NOT NULL,
	"low" double precision,
	"high" double precision,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "base_exposures_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "benches" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"process" varchar(40) NOT NULL,
	"paper_id" uuid,
	"sensitizer_id" uuid,
	"film_id" uuid,
	"inkjet_id" uuid,
	"lamp_id" uuid,
	"recipe" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"path" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"ink" jsonb NOT NULL,
	"reading_channel" varchar(20) NOT NULL,
	"mirror" boolean NOT NULL,
	"starter" boolean DEFAULT false NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "benches_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "curve_readings" (
	"studio_id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"curve_id" uuid NOT NULL,
	"reading_id" uuid NOT NULL,
	CONSTRAINT "curve_readings_studio_id_curve_id_reading_id_pk" PRIMARY KEY("studio_id","curve_id","reading_id")
);
--> statement-breakpoint
CREATE TABLE "curves" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"state" varchar(10) NOT NULL,
	"aim" varchar(24) NOT NULL,
	"calibrated" boolean NOT NULL,
	"assumptions" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"response" jsonb NOT NULL,
	"response_low" jsonb,
	"response_high" jsonb,
	"expected_error" jsonb,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"in_use_since" timestamp with time zone,
	CONSTRAINT "curves_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "curves_of_bench" UNIQUE("studio_id","bench_id","id"),
	CONSTRAINT "curves_version" UNIQUE("studio_id","bench_id","version"),
	CONSTRAINT "curves_state" CHECK ("curves"."state" in ('draft', 'in-use', 'retired'))
);
--> statement-breakpoint
CREATE TABLE "readings" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"state" varchar(10) NOT NULL,
	"quality" varchar(10) NOT NULL,
	"unit" varchar(12),
	"zero" varchar(10),
	"paper_lightness" real,
	"patches" jsonb NOT NULL,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "readings_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "readings_of_bench" UNIQUE("studio_id","bench_id","id")
);
--> statement-breakpoint
CREATE TABLE "negatives" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"photo_id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"curve_id" uuid NOT NULL,
	"aim" varchar(24) NOT NULL,
	"settings" jsonb NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid NOT NULL,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "negatives_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "photos" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"uploader_id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"format" varchar(10) NOT NULL,
	"bytes" bigint NOT NULL,
	"sha256" varchar(64) NOT NULL,
	"width" integer NOT NULL,
	"height" integer NOT NULL,
	"orientation" integer NOT NULL,
	"colour_profile" varchar(120) NOT NULL,
	"binned_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "photos_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "photos_orientation" CHECK ("photos"."orientation" between 1 and 8)
);
--> statement-breakpoint
CREATE TABLE "renders" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"photo_id" uuid NOT NULL,
	"render_key" varchar(64) NOT NULL,
	"format" varchar(8) NOT NULL,
	"state" varchar(10) NOT NULL,
	"progress" real DEFAULT 0 NOT NULL,
	"film_order" jsonb NOT NULL,
	"lease_owner" varchar(80),
	"lease_until" timestamp with time zone,
	"fence" integer DEFAULT 0 NOT NULL,
	"failures" integer DEFAULT 0 NOT NULL,
	"request_id" varchar(64),
	"error_code" varchar(60),
	"error_message" text,
	"bytes" bigint,
	"sha256" varchar(64),
	"pinned" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ready_at" timestamp with time zone,
	"last_used_at" timestamp with time zone,
	CONSTRAINT "renders_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "films" ADD CONSTRAINT "films_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "inkjets" ADD CONSTRAINT "inkjets_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lamps" ADD CONSTRAINT "lamps_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "papers" ADD CONSTRAINT "papers_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scanners" ADD CONSTRAINT "scanners_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sensitizers" ADD CONSTRAINT "sensitizers_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "base_exposures" ADD CONSTRAINT "base_exposures_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "base_exposures" ADD CONSTRAINT "base_exposures_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_paper_id_papers_studio_id_id_fk" FOREIGN KEY ("studio_id","paper_id") REFERENCES "public"."papers"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_sensitizer_id_sensitizers_studio_id_id_fk" FOREIGN KEY ("studio_id","sensitizer_id") REFERENCES "public"."sensitizers"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_film_id_films_studio_id_id_fk" FOREIGN KEY ("studio_id","film_id") REFERENCES "public"."films"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_inkjet_id_inkjets_studio_id_id_fk" FOREIGN KEY ("studio_id","inkjet_id") REFERENCES "public"."inkjets"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_studio_id_lamp_id_lamps_studio_id_id_fk" FOREIGN KEY ("studio_id","lamp_id") REFERENCES "public"."lamps"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "curve_readings" ADD CONSTRAINT "curve_readings_studio_id_bench_id_curve_id_curves_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","curve_id") REFERENCES "public"."curves"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "curve_readings" ADD CONSTRAINT "curve_readings_studio_id_bench_id_reading_id_readings_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","reading_id") REFERENCES "public"."readings"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "curves" ADD CONSTRAINT "curves_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "curves" ADD CONSTRAINT "curves_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "negatives" ADD CONSTRAINT "negatives_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "negatives" ADD CONSTRAINT "negatives_studio_id_photo_id_photos_studio_id_id_fk" FOREIGN KEY ("studio_id","photo_id") REFERENCES "public"."photos"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "negatives" ADD CONSTRAINT "negatives_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "negatives" ADD CONSTRAINT "negatives_studio_id_bench_id_curve_id_curves_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","curve_id") REFERENCES "public"."curves"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photos" ADD CONSTRAINT "photos_uploader_id_users_id_fk" FOREIGN KEY ("uploader_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "renders" ADD CONSTRAINT "renders_studio_id_photo_id_photos_studio_id_id_fk" FOREIGN KEY ("studio_id","photo_id") REFERENCES "public"."photos"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "events_studio" ON "events" USING btree ("studio_id","id");--> statement-breakpoint
CREATE INDEX "memberships_user" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "sessions_user" ON "sessions" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "users_email" ON "users" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "base_exposures_bench" ON "base_exposures" USING btree ("studio_id","bench_id","id");--> statement-breakpoint
CREATE UNIQUE INDEX "benches_one_starter" ON "benches" USING btree ("studio_id","process") WHERE "benches"."starter";--> statement-breakpoint
CREATE UNIQUE INDEX "curves_one_in_use" ON "curves" USING btree ("studio_id","bench_id") WHERE "curves"."state" = 'in-use';--> statement-breakpoint
CREATE INDEX "negatives_maker" ON "negatives" USING btree ("studio_id","created_by","id");--> statement-breakpoint
CREATE INDEX "negatives_photo" ON "negatives" USING btree ("studio_id","photo_id");--> statement-breakpoint
CREATE UNIQUE INDEX "photos_same_bytes" ON "photos" USING btree ("studio_id","uploader_id","sha256");--> statement-breakpoint
CREATE INDEX "photos_uploader" ON "photos" USING btree ("studio_id","uploader_id","id");--> statement-breakpoint
CREATE UNIQUE INDEX "renders_key" ON "renders" USING btree ("studio_id","render_key");--> statement-breakpoint
CREATE INDEX "renders_open" ON "renders" USING btree ("created_at") WHERE "renders"."state" in ('waiting', 'making');