-- Hand-written: what the schema language can't say.

-- Saved versions of chains and their links are only ever added to.
CREATE TRIGGER chain_versions_rows_stand BEFORE UPDATE OR DELETE ON "chain_versions"
  FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER chain_versions_table_stands BEFORE TRUNCATE ON "chain_versions"
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER chain_links_rows_stand BEFORE UPDATE OR DELETE ON "chain_links"
  FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER chain_links_table_stands BEFORE TRUNCATE ON "chain_links"
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint

-- Numbers run without gaps, and only the first version has no parent.
CREATE FUNCTION demand_next_chain_version() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  latest integer;
BEGIN
  SELECT coalesce(max(number), 0) INTO latest FROM chain_versions WHERE chain_id = NEW.chain_id;
  IF NEW.number <> latest + 1 THEN
    RAISE EXCEPTION 'version % of chain % is not the next one (latest is %)', NEW.number, NEW.chain_id, latest
      USING ERRCODE = 'unique_violation';
  END IF;
  IF (NEW.parent_number IS NULL) <> (NEW.number = 1) THEN
    RAISE EXCEPTION 'only the first version of a chain has no parent'
      USING ERRCODE = 'check_violation';
  END IF;
  RETURN NEW;
END;
$$;--> statement-breakpoint
CREATE TRIGGER chain_versions_next_number BEFORE INSERT ON "chain_versions"
  FOR EACH ROW EXECUTE FUNCTION demand_next_chain_version();--> statement-breakpoint

-- A drawing number that was given stays given, and a chain stays in its project.
CREATE TRIGGER chains_number_stands BEFORE UPDATE ON "chains"
  FOR EACH ROW EXECUTE FUNCTION refuse_renumbering();--> statement-breakpoint

-- A link says what the spec of its version says: nobody can tie a saved stage to another design afterwards.
CREATE FUNCTION demand_stated_link() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NOT EXISTS (
    SELECT 1
    FROM chain_versions saved,
      jsonb_array_elements(saved.spec -> 'stages') AS stage,
      LATERAL (SELECT coalesce(stage -> 'source' -> 'link', stage -> 'filter' -> 'link') AS link) AS stated
    WHERE saved.id = NEW.chain_version_id
      AND stage ->> 'id' = NEW.stage_id
      AND stated.link ->> 'designId' = NEW.design_id::text
      AND stated.link ->> 'version' = NEW.design_version::text
  ) THEN
    RAISE EXCEPTION 'the chain''s version does not state this link'
      USING ERRCODE = 'check_violation';
  END IF;
  RETURN NEW;
END;
$$;--> statement-breakpoint
CREATE TRIGGER chain_links_stated BEFORE INSERT ON "chain_links"
  FOR EACH ROW EXECUTE FUNCTION demand_stated_link();
