-- A device's known-good backup is one of its own. The two tables name each other, so this key is written here.
ALTER TABLE "device" ADD CONSTRAINT "device_known_good_fk"
  FOREIGN KEY ("owner_id", "id", "known_good_backup_id") REFERENCES "backup" ("owner_id", "device_id", "id");
--> statement-breakpoint
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'rows of % are never changed', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;
--> statement-breakpoint
-- A revision says the same for ever; only the names of people and parents that are gone may be taken out of it.
CREATE TRIGGER revision_immutable BEFORE UPDATE ON "revision" FOR EACH ROW
  WHEN ((OLD.id, OLD.profile_id, OLD.number, OLD.document, OLD.document_hash, OLD.note, OLD.created_at)
    IS DISTINCT FROM (NEW.id, NEW.profile_id, NEW.number, NEW.document, NEW.document_hash, NEW.note, NEW.created_at))
  EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER backup_content_immutable BEFORE UPDATE ON "backup_content" FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER plan_immutable BEFORE UPDATE ON "plan" FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_immutable BEFORE UPDATE ON "audit" FOR EACH ROW
  WHEN ((OLD.id, OLD.at, OLD.action, OLD.subject, OLD.detail) IS DISTINCT FROM (NEW.id, NEW.at, NEW.action, NEW.subject, NEW.detail))
  EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- A backup that a plan rests on, or leads to, keeps its place, and so does the one that a device comes back to.
CREATE FUNCTION keep_backup() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF EXISTS (SELECT FROM plan WHERE backup_id = OLD.id OR target_backup_id = OLD.id)
    OR EXISTS (SELECT FROM device WHERE id = OLD.device_id AND known_good_backup_id = OLD.id) THEN
    RAISE EXCEPTION 'a plan or a device rests on this backup' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER backup_in_use BEFORE UPDATE OF deleted_at ON "backup" FOR EACH ROW
  WHEN (OLD.deleted_at IS NULL AND NEW.deleted_at IS NOT NULL) EXECUTE FUNCTION keep_backup();
