import { index, integer, jsonb, pgTable, primaryKey, text, timestamp, unique, uuid } from "drizzle-orm/pg-core";
import { contents, pages } from "./pages";
import { groups, users } from "./people";

const at = (name: string) => timestamp(name, { withTimezone: true, mode: "date" });

/**
 * An immutable, numbered freeze of a page. The database refuses to change or delete these rows (triggers, and the
 * application's role has no right to).
 */
export const snapshots = pgTable(
  "snapshots",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    pageId: uuid("page_id")
      .notNull()
      .references(() => pages.id, { onDelete: "restrict" }),
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "restrict" }),
    /** 1, 2, 3 … within the page. */
    number: integer("number").notNull(),
    title: text("title").notNull(),
    /** SHA-256 of the canonical manifest. */
    hash: text("hash").notNull(),
    previousHash: text("previous_hash"),
    format: text("format").notNull(),
    engine: text("engine").notNull(),
    /** Opaque id only; names are looked up and may have been erased. */
    frozenBy: uuid("frozen_by").notNull(),
    frozenAt: at("frozen_at").notNull().defaultNow(),
    note: text("note"),
    /** What `snapshot.json` says besides: counts, people, bodies. Outside the hash. */
    about: jsonb("about").$type<Record<string, unknown>>().notNull(),
  },
  (t) => [unique("snapshots_page_number").on(t.pageId, t.number), index("snapshots_group").on(t.groupId)],
);

/** The files of a snapshot, manifest included; their bytes stand in `contents`. */
export const snapshotFiles = pgTable(
  "snapshot_files",
  {
    snapshotId: uuid("snapshot_id")
      .notNull()
      .references(() => snapshots.id, { onDelete: "restrict" }),
    path: text("path").notNull(),
    sha256: text("sha256")
      .notNull()
      .references(() => contents.sha256),
    size: integer("size").notNull(),
  },
  (t) => [primaryKey({ columns: [t.snapshotId, t.path] })],
);

/** A revocable, expiring link that lets a guest read one snapshot or one live page. */
export const readingLinks = pgTable(
  "reading_links",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    /** SHA-256 of the secret in the link. */
    tokenHash: text("token_hash").notNull().unique(),
    /** Exactly one of the two. */
    snapshotId: uuid("snapshot_id").references(() => snapshots.id, { onDelete: "restrict" }),
    pageId: uuid("page_id").references(() => pages.id, { onDelete: "cascade" }),
    label: text("label").notNull().default(""),
    createdBy: uuid("created_by").references(() => users.id, { onDelete: "set null" }),
    createdAt: at("created_at").notNull().defaultNow(),
    expiresAt: at("expires_at").notNull(),
    withdrawnAt: at("withdrawn_at"),
    lastUsedAt: at("last_used_at"),
  },
  (t) => [index("reading_links_group").on(t.groupId)],
);

/** What a guest's cookie stands for, got by exchanging a link with a button. Token stored hashed. */
export const readingSessions = pgTable("reading_sessions", {
  tokenHash: text("token_hash").primaryKey(),
  linkId: uuid("link_id")
    .notNull()
    .references(() => readingLinks.id, { onDelete: "cascade" }),
  expires: at("expires").notNull(),
});
