ALTER TABLE "readings" ADD COLUMN "file_format" varchar(8);--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "file_width" integer;--> statement-breakpoint
ALTER TABLE "readings" ADD COLUMN "file_height" integer;