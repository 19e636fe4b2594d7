CREATE TABLE "group_bodies" (
	"group_id" uuid NOT NULL,
	"code" text NOT NULL,
	"version" integer NOT NULL,
	"name" text NOT NULL,
	"description" text,
	"source" text NOT NULL,
	"from_memory" boolean NOT NULL,
	"values" jsonb NOT NULL,
	"made_by" uuid NOT NULL,
	"made_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "group_bodies_group_id_code_version_pk" PRIMARY KEY("group_id","code","version")
);
--> statement-breakpoint
ALTER TABLE "group_bodies" ADD CONSTRAINT "group_bodies_group_id_groups_id_fk" FOREIGN KEY ("group_id") REFERENCES "public"."groups"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "group_bodies" ADD CONSTRAINT "group_bodies_version_counts" CHECK ("version" >= 1);--> statement-breakpoint
ALTER TABLE "group_bodies" ADD CONSTRAINT "group_bodies_code_shape" CHECK ("code" ~ '^[A-Za-z][A-Za-z0-9_]{0,27}$');--> statement-breakpoint
ALTER TABLE "group_bodies" ADD CONSTRAINT "group_bodies_source_given" CHECK (length(trim("source")) > 0);--> statement-breakpoint
CREATE TRIGGER "group_bodies_frozen" BEFORE UPDATE ON "group_bodies" FOR EACH ROW
  EXECUTE FUNCTION "refuse_change"('a version of a body is never changed; add the next one');
