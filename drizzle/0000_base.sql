CREATE TABLE "accounts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"label" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "accounts_email_lowercase" CHECK ("accounts"."email" = lower("accounts"."email")),
	CONSTRAINT "accounts_email_length" CHECK (length("accounts"."email") between 3 and 254),
	CONSTRAINT "accounts_label_length" CHECK (length("accounts"."label") between 1 and 80)
);
--> statement-breakpoint
CREATE TABLE "credentials" (
	"account_id" uuid PRIMARY KEY NOT NULL,
	"password_hash" text NOT NULL,
	"changed_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "password_resets" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"account_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone,
	CONSTRAINT "password_resets_hashed" CHECK ("password_resets"."token_hash" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "audit" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "audit_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor" uuid,
	"team" uuid,
	"action" text NOT NULL,
	"object" text NOT NULL,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "designs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"serial" integer NOT NULL,
	"drawing_number" text NOT NULL,
	"title" text NOT NULL,
	"starting_spec" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "designs_project_serial_key" UNIQUE("project_id","serial"),
	CONSTRAINT "designs_project_drawing_number_key" UNIQUE("project_id","drawing_number"),
	CONSTRAINT "designs_title_length" CHECK (length("designs"."title") between 1 and 120)
);
--> statement-breakpoint
CREATE TABLE "drafts" (
	"design_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"spec" jsonb NOT NULL,
	"parent_number" integer,
	"revision" integer NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "drafts_design_id_account_id_pk" PRIMARY KEY("design_id","account_id"),
	CONSTRAINT "drafts_revision_counts" CHECK ("drafts"."revision" >= 1),
	CONSTRAINT "drafts_spec_size" CHECK (pg_column_size("drafts"."spec") <= 65536)
);
--> statement-breakpoint
CREATE TABLE "versions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"design_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"parent_number" integer,
	"note" text NOT NULL,
	"spec" jsonb NOT NULL,
	"coefficients" jsonb NOT NULL,
	"checksum" text NOT NULL,
	"engine_version" text NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "versions_design_number_key" UNIQUE("design_id","number"),
	CONSTRAINT "versions_number_counts" CHECK ("versions"."number" >= 1),
	CONSTRAINT "versions_parent_earlier" CHECK ("versions"."parent_number" is null or "versions"."parent_number" < "versions"."number"),
	CONSTRAINT "versions_note_length" CHECK (length("versions"."note") between 1 and 500),
	CONSTRAINT "versions_checksum_form" CHECK ("versions"."checksum" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "installation" (
	"mark" text PRIMARY KEY NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"key" varchar(255) PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" bigint
);
--> statement-breakpoint
CREATE TABLE "projects" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"code" text NOT NULL,
	"name" text NOT NULL,
	"last_serial" integer DEFAULT 0 NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "projects_team_code_key" UNIQUE("team_id","code"),
	CONSTRAINT "projects_code_form" CHECK ("projects"."code" ~ '^[A-Z][A-Z0-9]{1,5}$'),
	CONSTRAINT "projects_name_length" CHECK (length("projects"."name") between 1 and 120),
	CONSTRAINT "projects_serial_counts" CHECK ("projects"."last_serial" >= 0)
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" text PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"absolute_expires_at" timestamp with time zone NOT NULL,
	"created_at" timestamp with time zone NOT NULL,
	"agent" text DEFAULT '' NOT NULL,
	CONSTRAINT "sessions_id_hashed" CHECK ("sessions"."id" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "sessions_idle_within_absolute" CHECK ("sessions"."expires_at" <= "sessions"."absolute_expires_at"),
	CONSTRAINT "sessions_agent_length" CHECK (length("sessions"."agent") <= 200)
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"team_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"role" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_team_id_account_id_pk" PRIMARY KEY("team_id","account_id"),
	CONSTRAINT "memberships_role_known" CHECK ("memberships"."role" in ('owner', 'designer', 'reviewer', 'integrator', 'observer'))
);
--> statement-breakpoint
CREATE TABLE "teams" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "teams_name_length" CHECK (length("teams"."name") between 1 and 80)
);
--> statement-breakpoint
ALTER TABLE "credentials" ADD CONSTRAINT "credentials_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "password_resets" ADD CONSTRAINT "password_resets_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "designs" ADD CONSTRAINT "designs_project_id_projects_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."projects"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "designs" ADD CONSTRAINT "designs_created_by_accounts_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."accounts"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drafts" ADD CONSTRAINT "drafts_design_id_designs_id_fk" FOREIGN KEY ("design_id") REFERENCES "public"."designs"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drafts" ADD CONSTRAINT "drafts_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "drafts" ADD CONSTRAINT "drafts_parent_fk" FOREIGN KEY ("design_id","parent_number") REFERENCES "public"."versions"("design_id","number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "versions" ADD CONSTRAINT "versions_design_id_designs_id_fk" FOREIGN KEY ("design_id") REFERENCES "public"."designs"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "versions" ADD CONSTRAINT "versions_saved_by_accounts_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."accounts"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "versions" ADD CONSTRAINT "versions_parent_fk" FOREIGN KEY ("design_id","parent_number") REFERENCES "public"."versions"("design_id","number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "projects" ADD CONSTRAINT "projects_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "projects" ADD CONSTRAINT "projects_created_by_accounts_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."accounts"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_accounts_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_team_id_teams_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."teams"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "accounts_email_key" ON "accounts" USING btree ("email");--> statement-breakpoint
CREATE INDEX "password_resets_account_id_index" ON "password_resets" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "audit_team_at_index" ON "audit" USING btree ("team","at");--> statement-breakpoint
CREATE INDEX "audit_object_index" ON "audit" USING btree ("object");--> statement-breakpoint
CREATE INDEX "drafts_account_id_index" ON "drafts" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "rate_limits_expire_index" ON "rate_limits" USING btree ("expire");--> statement-breakpoint
CREATE INDEX "sessions_user_id_index" ON "sessions" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "memberships_account_id_index" ON "memberships" USING btree ("account_id");