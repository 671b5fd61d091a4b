CREATE TABLE "identities" (
	"id" uuid PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"issuer" varchar(500) NOT NULL,
	"subject" varchar(255) NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_used_at" timestamp with time zone NOT NULL,
	CONSTRAINT "identities_subject" UNIQUE("issuer","subject")
);
--> statement-breakpoint
CREATE TABLE "openid_sign_ins" (
	"secret_hash" varchar(64) PRIMARY KEY NOT NULL,
	"state" varchar(64) NOT NULL,
	"nonce" varchar(64) NOT NULL,
	"code_verifier" varchar(128) NOT NULL,
	"next" varchar(200),
	"invitation_hash" varchar(64),
	"again_session_id" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
ALTER TABLE "identities" ADD CONSTRAINT "identities_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "openid_sign_ins" ADD CONSTRAINT "openid_sign_ins_again_session_id_sessions_id_fk" FOREIGN KEY ("again_session_id") REFERENCES "public"."sessions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "identities_user" ON "identities" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "openid_sign_ins_expiry" ON "openid_sign_ins" USING btree ("expires_at");