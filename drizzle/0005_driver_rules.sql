-- A written version is published with a green report of that very definition and of no other. The two tables name each other.
ALTER TABLE "driver_version" ADD CONSTRAINT "driver_version_report_fk"
  FOREIGN KEY ("report_id", "id", "hash", "report_green") REFERENCES "conformance_report" ("id", "version_id", "driver_hash", "green");
--> statement-breakpoint
CREATE TRIGGER conformance_report_immutable BEFORE UPDATE ON "conformance_report" FOR EACH ROW
  WHEN ((OLD.id, OLD.version_id, OLD.driver_hash, OLD.green, OLD.report, OLD.created_at)
    IS DISTINCT FROM (NEW.id, NEW.version_id, NEW.driver_hash, NEW.green, NEW.report, NEW.created_at))
  EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- Only a draft changes what it says; a version keeps its name, and one that was published keeps its place.
CREATE TRIGGER driver_version_immutable BEFORE UPDATE ON "driver_version" FOR EACH ROW
  WHEN ((OLD.id, OLD.slug, OLD.version, OLD.origin) IS DISTINCT FROM (NEW.id, NEW.slug, NEW.version, NEW.origin)
    OR (NEW.state <> 'draft' AND (OLD.definition, OLD.hash) IS DISTINCT FROM (NEW.definition, NEW.hash)))
  EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER driver_version_kept BEFORE DELETE ON "driver_version" FOR EACH ROW
  WHEN (OLD.state IN ('published', 'withdrawn')) EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- What was captured stays as it was captured.
CREATE TRIGGER recording_immutable BEFORE UPDATE ON "recording" FOR EACH ROW
  WHEN ((OLD.id, OLD.driver_slug, OLD.driver_version, OLD.struck_out, OLD.exchanges, OLD.lines, OLD.content, OLD.created_at)
    IS DISTINCT FROM (NEW.id, NEW.driver_slug, NEW.driver_version, NEW.struck_out, NEW.exchanges, NEW.lines, NEW.content, NEW.created_at))
  EXECUTE FUNCTION refuse_change();
