CREATE TABLE "uploads" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"file_name" varchar(255) NOT NULL,
	"bytes" bigint NOT NULL,
	"last_modified_ms" bigint,
	"fingerprint" varchar(8),
	"origin" varchar(12) NOT NULL,
	"state" varchar(12) DEFAULT 'unfinished' NOT NULL,
	"photo_id" uuid,
	"refusal_code" varchar(60),
	"refusal_message" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"finished_at" timestamp with time zone,
	CONSTRAINT "uploads_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "uploads_outcome" CHECK (("uploads"."state" = 'kept') = ("uploads"."photo_id" is not null) and ("uploads"."state" = 'refused') = ("uploads"."refusal_code" is not null))
);
--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_person_id_users_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_studio_id_photo_id_photos_studio_id_id_fk" FOREIGN KEY ("studio_id","photo_id") REFERENCES "public"."photos"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "uploads_person" ON "uploads" USING btree ("studio_id","person_id","id");--> statement-breakpoint
CREATE INDEX "uploads_photo" ON "uploads" USING btree ("studio_id","photo_id");