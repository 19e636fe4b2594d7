import { boolean, integer, jsonb, pgTable, primaryKey, text, timestamp, uuid } from "drizzle-orm/pg-core";
import type { OwnValue } from "@/cells";
import { groups } from "./people";

/**
 * A group's own reference compositions. A row is one version of one body and never changes (a trigger says so): whoever corrects
 * a body adds its next version, so that pages which use an earlier one keep their numbers.
 */
export const groupBodies = pgTable(
  "group_bodies",
  {
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    /** Short name; with the version it makes the id that pages write: `OWN_Mantle_2`. */
    code: text("code").notNull(),
    version: integer("version").notNull(),
    name: text("name").notNull(),
    description: text("description"),
    source: text("source").notNull(),
    fromMemory: boolean("from_memory").notNull(),
    values: jsonb("values").$type<OwnValue[]>().notNull(),
    /** Opaque id only; names are looked up and may have been erased. */
    madeBy: uuid("made_by").notNull(),
    madeAt: timestamp("made_at", { withTimezone: true, mode: "date" }).notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.groupId, t.code, t.version] })],
);
