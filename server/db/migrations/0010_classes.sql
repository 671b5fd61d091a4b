CREATE TABLE "class_students" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"class_id" uuid NOT NULL,
	"code_hash" varchar(64),
	"kept_at" timestamp with time zone,
	"removed_at" timestamp with time zone,
	"joined_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "class_students_studio_id_id_pk" PRIMARY KEY("studio_id","id"),
	CONSTRAINT "class_students_id_unique" UNIQUE("id"),
	CONSTRAINT "class_students_codeHash_unique" UNIQUE("code_hash")
);
--> statement-breakpoint
CREATE TABLE "classes" (
	"studio_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" varchar(120) NOT NULL,
	"ends_at" timestamp with time zone NOT NULL,
	"room_code" varchar(8),
	"joining_closed_at" timestamp with time zone,
	"erased_at" timestamp with time zone,
	"opened_by" uuid NOT NULL,
	"body_hash" varchar(64) NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "classes_studio_id_id_pk" PRIMARY KEY("studio_id","id")
);
--> statement-breakpoint
ALTER TABLE "users" ALTER COLUMN "email" DROP NOT NULL;--> statement-breakpoint
ALTER TABLE "negatives" ADD COLUMN "handed_in_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "class_students" ADD CONSTRAINT "class_students_id_users_id_fk" FOREIGN KEY ("id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "class_students" ADD CONSTRAINT "class_students_studio_id_class_id_classes_studio_id_id_fk" FOREIGN KEY ("studio_id","class_id") REFERENCES "public"."classes"("studio_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "classes" ADD CONSTRAINT "classes_studio_id_studios_id_fk" FOREIGN KEY ("studio_id") REFERENCES "public"."studios"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "classes" ADD CONSTRAINT "classes_opened_by_users_id_fk" FOREIGN KEY ("opened_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "class_students_class" ON "class_students" USING btree ("studio_id","class_id");--> statement-breakpoint
CREATE UNIQUE INDEX "classes_room_code" ON "classes" USING btree ("room_code");--> statement-breakpoint
CREATE INDEX "classes_end" ON "classes" USING btree ("ends_at");