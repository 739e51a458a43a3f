-- Rows that are published or received once and never change. A refused change is a bug in the caller, so it raises.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% rows never change', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END
$$;
--> statement-breakpoint
CREATE TRIGGER course_book_versions_never_change BEFORE UPDATE OR DELETE ON course_book_versions
  FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER packs_never_change BEFORE UPDATE OR DELETE ON packs FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER run_chunks_never_change BEFORE UPDATE OR DELETE ON run_chunks FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER run_results_never_change BEFORE UPDATE ON run_results FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
-- Journal chunks hardly compress; out of line and uncompressed they are written once and read back as they are.
ALTER TABLE run_chunks ALTER COLUMN bytes SET STORAGE EXTERNAL;
