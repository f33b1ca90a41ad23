ALTER TABLE "drafts" DROP CONSTRAINT "drafts_spec_size";--> statement-breakpoint
ALTER TABLE "drafts" ADD CONSTRAINT "drafts_spec_size" CHECK (pg_column_size("drafts"."spec") <= 262144);