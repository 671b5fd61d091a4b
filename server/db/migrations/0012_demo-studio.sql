ALTER TABLE "studios" ADD COLUMN "is_demo" boolean DEFAULT false NOT NULL;
--> statement-breakpoint
-- Demo studios that were made before this column. Nobody else has an address in a reserved domain.
UPDATE "studios" SET "is_demo" = true WHERE "id" IN (SELECT "studio_id" FROM "memberships" JOIN "users" ON "users"."id" = "user_id" WHERE "role" = 'owner' AND "email" = 'owner@ropeworks.example');
