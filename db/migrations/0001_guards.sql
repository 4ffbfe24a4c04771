-- What may never change, guarded for every role: an image's identity, and rows that are history.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only', TG_TABLE_NAME USING ERRCODE = '42501';
END $$;
--> statement-breakpoint
CREATE TRIGGER ledger_append_only BEFORE UPDATE OR DELETE ON ledger FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_no_truncate BEFORE TRUNCATE ON ledger FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER decisions_append_only BEFORE UPDATE OR DELETE ON decisions FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER waivers_append_only BEFORE UPDATE OR DELETE ON waivers FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER vehicle_sheets_append_only BEFORE UPDATE OR DELETE ON vehicle_sheets FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER gate_plans_append_only BEFORE UPDATE OR DELETE ON gate_plans FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE FUNCTION keep_revision_identity() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (NEW.id, NEW.workspace_id, NEW.programme_id, NEW.number, NEW.image_sha256, NEW.image_bytes, NEW.author_id, NEW.created_at)
     IS DISTINCT FROM
     (OLD.id, OLD.workspace_id, OLD.programme_id, OLD.number, OLD.image_sha256, OLD.image_bytes, OLD.author_id, OLD.created_at) THEN
    RAISE EXCEPTION 'a revision''s image, number and author never change' USING ERRCODE = '42501';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER revisions_keep_identity BEFORE UPDATE ON revisions FOR EACH ROW EXECUTE FUNCTION keep_revision_identity();
--> statement-breakpoint
CREATE FUNCTION keep_run_identity() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (NEW.id, NEW.workspace_id, NEW.programme_id, NEW.number, NEW.log_sha256, NEW.tester_id, NEW.created_at)
     IS DISTINCT FROM
     (OLD.id, OLD.workspace_id, OLD.programme_id, OLD.number, OLD.log_sha256, OLD.tester_id, OLD.created_at) THEN
    RAISE EXCEPTION 'a run''s log, number and tester never change' USING ERRCODE = '42501';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER runs_keep_identity BEFORE UPDATE ON runs FOR EACH ROW EXECUTE FUNCTION keep_run_identity();
--> statement-breakpoint
ALTER TABLE programmes ADD CONSTRAINT programmes_standing FOREIGN KEY (workspace_id, standing_revision_id) REFERENCES revisions (workspace_id, id);
