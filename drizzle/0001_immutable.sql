-- Hand-written: what the schema language can't say.

-- Saved versions and the audit trail are only ever added to.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only: % refused', TG_TABLE_NAME, lower(TG_OP)
    USING ERRCODE = 'restrict_violation';
END;
$$;--> statement-breakpoint
CREATE TRIGGER versions_rows_stand BEFORE UPDATE OR DELETE ON "versions"
  FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER versions_table_stands BEFORE TRUNCATE ON "versions"
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER audit_rows_stand BEFORE UPDATE OR DELETE ON "audit"
  FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER audit_table_stands BEFORE TRUNCATE ON "audit"
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();--> statement-breakpoint

-- Numbers run without gaps, and only the first version has no parent: a history with a hole in it proves nothing.
CREATE FUNCTION demand_next_version() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  latest integer;
BEGIN
  SELECT coalesce(max(number), 0) INTO latest FROM versions WHERE design_id = NEW.design_id;
  IF NEW.number <> latest + 1 THEN
    RAISE EXCEPTION 'version % of design % is not the next one (latest is %)', NEW.number, NEW.design_id, latest
      USING ERRCODE = 'unique_violation';
  END IF;
  IF (NEW.parent_number IS NULL) <> (NEW.number = 1) THEN
    RAISE EXCEPTION 'only the first version of a design has no parent'
      USING ERRCODE = 'check_violation';
  END IF;
  RETURN NEW;
END;
$$;--> statement-breakpoint
CREATE TRIGGER versions_next_number BEFORE INSERT ON "versions"
  FOR EACH ROW EXECUTE FUNCTION demand_next_version();--> statement-breakpoint

-- A drawing number that was given stays given, and a design stays in its project.
CREATE FUNCTION refuse_renumbering() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.drawing_number <> OLD.drawing_number OR NEW.serial <> OLD.serial OR NEW.project_id <> OLD.project_id THEN
    RAISE EXCEPTION 'a drawing number is given once'
      USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END;
$$;--> statement-breakpoint
CREATE TRIGGER designs_number_stands BEFORE UPDATE ON "designs"
  FOR EACH ROW EXECUTE FUNCTION refuse_renumbering();--> statement-breakpoint

-- A team without an owner could never be managed again. Checked at commit, so that ownership can change hands in one transaction.
CREATE FUNCTION demand_owner() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF EXISTS (SELECT 1 FROM teams WHERE id = OLD.team_id)
     AND NOT EXISTS (SELECT 1 FROM memberships WHERE team_id = OLD.team_id AND role = 'owner') THEN
    RAISE EXCEPTION 'team % must keep an owner', OLD.team_id
      USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NULL;
END;
$$;--> statement-breakpoint
CREATE CONSTRAINT TRIGGER memberships_keep_owner AFTER UPDATE OR DELETE ON "memberships"
  DEFERRABLE INITIALLY DEFERRED FOR EACH ROW EXECUTE FUNCTION demand_owner();
