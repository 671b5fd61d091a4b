CREATE TABLE "scanner_profiles" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"scanner_id" uuid NOT NULL,
	"process" varchar(40) NOT NULL,
	"kind" varchar(20) NOT NULL,
	"points" jsonb NOT NULL,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "scanner_profiles_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "wedge_prints" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"wedge_id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"exposure_value" double precision,
	"exposure_unit" varchar(8),
	"exposed_at" timestamp with time zone,
	"dried_since" timestamp with time zone,
	"notes" text DEFAULT '' NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "wedge_prints_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "wedge_prints_of_wedge" UNIQUE("studio_id","wedge_id","id"),
	CONSTRAINT "wedge_prints_number" UNIQUE("studio_id","wedge_id","number")
);
--> statement-breakpoint
CREATE TABLE "wedges" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"code" varchar(10) NOT NULL,
	"kind" varchar(20) NOT NULL,
	"plan" jsonb NOT NULL,
	"width_mm" double precision NOT NULL,
	"height_mm" double precision NOT NULL,
	"pixels_per_inch" integer NOT NULL,
	"through_curve_id" uuid,
	"ink_color" varchar(7) NOT NULL,
	"path" jsonb NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"archived_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "wedges_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "wedges_code_unique" UNIQUE("code"),
	CONSTRAINT "wedges_of_bench" UNIQUE("studio_id","bench_id","id")
);
--> statement-breakpoint
CREATE TABLE "film_densities" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"tablet_id" uuid NOT NULL,
	"curve_id" uuid NOT NULL,
	"points" jsonb NOT NULL,
	"warnings" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "film_densities_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
CREATE TABLE "tablets" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"reading_id" uuid,
	"tablet_values" jsonb NOT NULL,
	"result" jsonb NOT NULL,
	"exposure_value" double precision,
	"exposure_unit" varchar(8),
	"body_hash" varchar(64) NOT NULL,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "tablets_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "tablets_of_bench" UNIQUE("studio_id","bench_id","id")
);
--> statement-breakpoint
CREATE TABLE "walk_steps" (
	"studio_id" uuid NOT NULL,
	"bench_id" uuid NOT NULL,
	"step" varchar(20) NOT NULL,
	"state" varchar(10),
	"clock_started_at" timestamp with time zone,
	"clock_seconds" integer,
	"notes" text DEFAULT '' NOT NULL,
	"changed_by" uuid,
	"changed_at" timestamp with time zone NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "walk_steps_studio_id_bench_id_step_pk" PRIMARY KEY("studio_id","bench_id","step")
);
--> statement-breakpoint
ALTER TABLE "renders" ALTER COLUMN "photo_id" DROP NOT NULL;--> statement-breakpoint
ALTER TABLE "curves" ADD COLUMN "response_low_of_all" jsonb;--> statement-breakpoint
ALTER TABLE "curves" ADD COLUMN "response_high_of_all" jsonb;--> statement-breakpoint
ALTER TABLE "curves" ADD COLUMN "basis" jsonb;--> statement-breakpoint
ALTER TABLE "curves" ADD COLUMN "colour_path" jsonb;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "wedge_id" uuid;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "wedge_print_id" uuid;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "scanner_id" uuid;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "scanner_profile_id" uuid;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "file_name" varchar(120);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "file_bytes" bigint;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "file_sha256" varchar(64);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "reading_order" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "corners" jsonb;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "evidence" jsonb;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "progress" real DEFAULT 1 NOT NULL;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "lease_owner" varchar(80);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "lease_until" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "fence" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "failures" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "request_id" varchar(64);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "error_code" varchar(60);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "error_message" text;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "ready_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "renders" ADD COLUMN "wedge_id" uuid;--> statement-breakpoint
ALTER TABLE "scanner_profiles" ADD CONSTRAINT "scanner_profiles_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scanner_profiles" ADD CONSTRAINT "scanner_profiles_studio_id_scanner_id_scanners_studio_id_id_fk" FOREIGN KEY ("studio_id","scanner_id") REFERENCES "public"."scanners"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wedge_prints" ADD CONSTRAINT "wedge_prints_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wedge_prints" ADD CONSTRAINT "wedge_prints_studio_id_bench_id_wedge_id_wedges_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","wedge_id") REFERENCES "public"."wedges"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wedges" ADD CONSTRAINT "wedges_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wedges" ADD CONSTRAINT "wedges_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "wedges" ADD CONSTRAINT "wedges_studio_id_bench_id_through_curve_id_curves_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","through_curve_id") REFERENCES "public"."curves"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "film_densities" ADD CONSTRAINT "film_densities_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "film_densities" ADD CONSTRAINT "film_densities_studio_id_bench_id_tablet_id_tablets_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","tablet_id") REFERENCES "public"."tablets"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "film_densities" ADD CONSTRAINT "film_densities_studio_id_bench_id_curve_id_curves_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","curve_id") REFERENCES "public"."curves"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tablets" ADD CONSTRAINT "tablets_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tablets" ADD CONSTRAINT "tablets_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tablets" ADD CONSTRAINT "tablets_studio_id_bench_id_reading_id_readings_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","reading_id") REFERENCES "public"."readings"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walk_steps" ADD CONSTRAINT "walk_steps_changed_by_users_id_fk" FOREIGN KEY ("changed_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "walk_steps" ADD CONSTRAINT "walk_steps_studio_id_bench_id_benches_studio_id_id_fk" FOREIGN KEY ("studio_id","bench_id") REFERENCES "public"."benches"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "scanner_profiles_scanner" ON "scanner_profiles" USING btree ("studio_id","scanner_id","id");--> statement-breakpoint
CREATE INDEX "wedges_bench" ON "wedges" USING btree ("studio_id","bench_id","id");--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_studio_id_bench_id_wedge_id_wedges_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","wedge_id") REFERENCES "public"."wedges"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_studio_id_wedge_id_wedge_print_id_wedge_prints_studio_id_wedge_id_id_fk" FOREIGN KEY ("studio_id","wedge_id","wedge_print_id") REFERENCES "public"."wedge_prints"("studio_id","wedge_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_studio_id_scanner_id_scanners_studio_id_id_fk" FOREIGN KEY ("studio_id","scanner_id") REFERENCES "public"."scanners"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "readings" ADD CONSTRAINT "readings_studio_id_scanner_profile_id_scanner_profiles_studio_id_id_fk" FOREIGN KEY ("studio_id","scanner_profile_id") REFERENCES "public"."scanner_profiles"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "renders" ADD CONSTRAINT "renders_studio_id_wedge_id_wedges_studio_id_id_fk" FOREIGN KEY ("studio_id","wedge_id") REFERENCES "public"."wedges"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "readings_open" ON "readings" USING btree ("created_at") WHERE "readings"."state" in ('waiting', 'making');--> statement-breakpoint
ALTER TABLE "renders" ADD CONSTRAINT "renders_subject" CHECK (num_nonnulls("renders"."photo_id", "renders"."wedge_id") = 1);