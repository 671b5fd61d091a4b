ALTER TABLE "base_exposures" ADD COLUMN "reading_id" uuid;--> statement-breakpoint
ALTER TABLE "base_exposures" ADD COLUMN "found" jsonb;--> statement-breakpoint
ALTER TABLE "base_exposures" ADD COLUMN "body_hash" varchar(64) DEFAULT '' NOT NULL;--> statement-breakpoint
ALTER TABLE "base_exposures" ADD CONSTRAINT "base_exposures_studio_id_bench_id_reading_id_readings_studio_id_bench_id_id_fk" FOREIGN KEY ("studio_id","bench_id","reading_id") REFERENCES "public"."readings"("studio_id","bench_id","id") ON DELETE no action ON UPDATE no action;