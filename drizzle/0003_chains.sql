CREATE TABLE "chain_drafts" (
	"chain_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"spec" jsonb NOT NULL,
	"parent_number" integer,
	"revision" integer NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "chain_drafts_chain_id_account_id_pk" PRIMARY KEY("chain_id","account_id"),
	CONSTRAINT "chain_drafts_revision_counts" CHECK ("chain_drafts"."revision" >= 1),
	CONSTRAINT "chain_drafts_spec_size" CHECK (pg_column_size("chain_drafts"."spec") <= 524288)
);
--> statement-breakpoint
CREATE TABLE "chain_links" (
	"chain_version_id" uuid NOT NULL,
	"stage_id" text NOT NULL,
	"design_id" uuid NOT NULL,
	"design_version" integer NOT NULL,
	CONSTRAINT "chain_links_chain_version_id_stage_id_pk" PRIMARY KEY("chain_version_id","stage_id")
);
--> statement-breakpoint
CREATE TABLE "chain_versions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"chain_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"parent_number" integer,
	"note" text NOT NULL,
	"spec" jsonb NOT NULL,
	"figures" jsonb NOT NULL,
	"numbers" jsonb NOT NULL,
	"checksum" text NOT NULL,
	"engine_version" text NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "chain_versions_chain_number_key" UNIQUE("chain_id","number"),
	CONSTRAINT "chain_versions_number_counts" CHECK ("chain_versions"."number" >= 1),
	CONSTRAINT "chain_versions_parent_earlier" CHECK ("chain_versions"."parent_number" is null or "chain_versions"."parent_number" < "chain_versions"."number"),
	CONSTRAINT "chain_versions_note_length" CHECK (length("chain_versions"."note") between 1 and 500),
	CONSTRAINT "chain_versions_checksum_form" CHECK ("chain_versions"."checksum" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "chains" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"project_id" uuid NOT NULL,
	"serial" integer NOT NULL,
	"drawing_number" text NOT NULL,
	"title" text NOT NULL,
	"starting_spec" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "chains_project_serial_key" UNIQUE("project_id","serial"),
	CONSTRAINT "chains_project_drawing_number_key" UNIQUE("project_id","drawing_number"),
	CONSTRAINT "chains_title_length" CHECK (length("chains"."title") between 1 and 120)
);
--> statement-breakpoint
ALTER TABLE "chain_drafts" ADD CONSTRAINT "chain_drafts_chain_id_chains_id_fk" FOREIGN KEY ("chain_id") REFERENCES "public"."chains"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_drafts" ADD CONSTRAINT "chain_drafts_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_drafts" ADD CONSTRAINT "chain_drafts_parent_fk" FOREIGN KEY ("chain_id","parent_number") REFERENCES "public"."chain_versions"("chain_id","number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_links" ADD CONSTRAINT "chain_links_chain_version_id_chain_versions_id_fk" FOREIGN KEY ("chain_version_id") REFERENCES "public"."chain_versions"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_links" ADD CONSTRAINT "chain_links_version_fk" FOREIGN KEY ("design_id","design_version") REFERENCES "public"."versions"("design_id","number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_versions" ADD CONSTRAINT "chain_versions_chain_id_chains_id_fk" FOREIGN KEY ("chain_id") REFERENCES "public"."chains"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_versions" ADD CONSTRAINT "chain_versions_saved_by_accounts_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."accounts"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chain_versions" ADD CONSTRAINT "chain_versions_parent_fk" FOREIGN KEY ("chain_id","parent_number") REFERENCES "public"."chain_versions"("chain_id","number") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chains" ADD CONSTRAINT "chains_project_id_projects_id_fk" FOREIGN KEY ("project_id") REFERENCES "public"."projects"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chains" ADD CONSTRAINT "chains_created_by_accounts_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."accounts"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "chain_drafts_account_id_index" ON "chain_drafts" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "chain_links_design_index" ON "chain_links" USING btree ("design_id","design_version");