-- What the tables alone cannot say: shapes that every writer must keep, and rows that nobody may change.

ALTER TABLE "users" ADD CONSTRAINT "users_email_lower" CHECK ("email" = lower("email"));--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_email_lower" CHECK ("email" = lower("email"));--> statement-breakpoint
ALTER TABLE "groups" ADD CONSTRAINT "groups_name_given" CHECK (length(trim("name")) BETWEEN 1 AND 120);--> statement-breakpoint
ALTER TABLE "reading_links" ADD CONSTRAINT "reading_links_one_target" CHECK (num_nonnulls("snapshot_id", "page_id") = 1);--> statement-breakpoint
ALTER TABLE "contents" ADD CONSTRAINT "contents_size" CHECK ("size" = octet_length("bytes"));--> statement-breakpoint
ALTER TABLE "contents" ADD CONSTRAINT "contents_addressed" CHECK ("sha256" = encode(sha256("bytes"), 'hex'));--> statement-breakpoint
ALTER TABLE "snapshots" ADD CONSTRAINT "snapshots_number_counts" CHECK ("number" >= 1);--> statement-breakpoint
ALTER TABLE "snapshots" ADD CONSTRAINT "snapshots_hash_shape" CHECK ("hash" ~ '^[0-9a-f]{64}$');--> statement-breakpoint

-- Bytes are compressed by whoever made them or not at all: TOAST compression would be work for nothing on most files.
ALTER TABLE "contents" ALTER COLUMN "bytes" SET STORAGE EXTERNAL;--> statement-breakpoint

CREATE FUNCTION "refuse_change"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is refused: %', TG_OP, TG_ARGV[0] USING ERRCODE = 'integrity_constraint_violation';
END
$$;--> statement-breakpoint

CREATE TRIGGER "snapshots_frozen" BEFORE UPDATE OR DELETE ON "snapshots" FOR EACH ROW
  EXECUTE FUNCTION "refuse_change"('a snapshot is frozen and is never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "snapshots_kept" BEFORE TRUNCATE ON "snapshots" FOR EACH STATEMENT
  EXECUTE FUNCTION "refuse_change"('a snapshot is frozen and is never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "snapshot_files_frozen" BEFORE UPDATE OR DELETE ON "snapshot_files" FOR EACH ROW
  EXECUTE FUNCTION "refuse_change"('the files of a snapshot are frozen and are never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "snapshot_files_kept" BEFORE TRUNCATE ON "snapshot_files" FOR EACH STATEMENT
  EXECUTE FUNCTION "refuse_change"('the files of a snapshot are frozen and are never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "contents_frozen" BEFORE UPDATE OR DELETE ON "contents" FOR EACH ROW
  EXECUTE FUNCTION "refuse_change"('bytes are kept as they came and are never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "contents_kept" BEFORE TRUNCATE ON "contents" FOR EACH STATEMENT
  EXECUTE FUNCTION "refuse_change"('bytes are kept as they came and are never changed or deleted');--> statement-breakpoint
CREATE TRIGGER "amendment_log_frozen" BEFORE UPDATE OR DELETE ON "amendment_log" FOR EACH ROW
  EXECUTE FUNCTION "refuse_change"('the record of amendments is only ever added to');--> statement-breakpoint
CREATE TRIGGER "amendment_log_kept" BEFORE TRUNCATE ON "amendment_log" FOR EACH STATEMENT
  EXECUTE FUNCTION "refuse_change"('the record of amendments is only ever added to');--> statement-breakpoint

-- A file joins a snapshot only in the transaction that froze it: afterwards the set is closed.
CREATE FUNCTION "refuse_late_file"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NOT EXISTS (SELECT 1 FROM "snapshots" s WHERE s."id" = NEW."snapshot_id" AND s.xmin = pg_current_xact_id()::xid) THEN
    RAISE EXCEPTION 'INSERT is refused: a snapshot takes no more files once it is frozen' USING ERRCODE = 'integrity_constraint_violation';
  END IF;
  RETURN NEW;
END
$$;--> statement-breakpoint
CREATE TRIGGER "snapshot_files_closed" BEFORE INSERT ON "snapshot_files" FOR EACH ROW EXECUTE FUNCTION "refuse_late_file"();
