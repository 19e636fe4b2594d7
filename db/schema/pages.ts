import { bigint, bigserial, customType, index, integer, jsonb, pgTable, primaryKey, text, timestamp, uuid } from "drizzle-orm/pg-core";
import { groups, users } from "./people";

const at = (name: string) => timestamp(name, { withTimezone: true, mode: "date" });
export const bytea = customType<{ data: Uint8Array; driverData: Buffer }>({
  dataType: () => "bytea",
  toDriver: (value) => Buffer.from(value.buffer, value.byteOffset, value.byteLength),
  fromDriver: (value) => new Uint8Array(value.buffer, value.byteOffset, value.byteLength),
});

/** Bytes by their SHA-256: sources as uploaded and files of snapshots. Never changed. */
export const contents = pgTable("contents", {
  sha256: text("sha256").primaryKey(),
  size: integer("size").notNull(),
  bytes: bytea("bytes").notNull(),
});

/** A table somebody of the group uploaded, kept byte for byte. */
export const sources = pgTable(
  "sources",
  {
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    sha256: text("sha256")
      .notNull()
      .references(() => contents.sha256),
    name: text("name").notNull(),
    mediaType: text("media_type").notNull(),
    size: integer("size").notNull(),
    rows: integer("rows"),
    uploadedBy: uuid("uploaded_by").references(() => users.id, { onDelete: "set null" }),
    uploadedAt: at("uploaded_at").notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.groupId, t.sha256] })],
);

/** One block of a page's outline, as the group's home draws it. */
export interface OutlineBlock {
  key: string;
  id: string;
  kind: string;
  name: string;
  width: number;
  /** SHA-256 of its source, for data blocks. */
  source?: string;
}

export const pages = pgTable(
  "pages",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    /** Copies of what the document says, kept by the realtime server for lists. */
    title: text("title").notNull(),
    outline: jsonb("outline").$type<OutlineBlock[]>().notNull().default([]),
    /** Raised only by restore or redaction; unsent edits of an older epoch are offered for review. */
    epoch: integer("epoch").notNull().default(1),
    createdBy: uuid("created_by").references(() => users.id, { onDelete: "set null" }),
    createdAt: at("created_at").notNull().defaultNow(),
    changedBy: uuid("changed_by").references(() => users.id, { onDelete: "set null" }),
    changedAt: at("changed_at").notNull().defaultNow(),
    archivedAt: at("archived_at"),
  },
  (t) => [index("pages_group").on(t.groupId)],
);

/** The log of edits, as received. A row here is what "Saved" means. */
export const pageUpdates = pgTable(
  "page_updates",
  {
    seq: bigserial("seq", { mode: "bigint" }).primaryKey(),
    pageId: uuid("page_id")
      .notNull()
      .references(() => pages.id, { onDelete: "cascade" }),
    epoch: integer("epoch").notNull(),
    userId: uuid("user_id").references(() => users.id, { onDelete: "set null" }),
    update: bytea("update").notNull(),
    at: at("at").notNull().defaultNow(),
  },
  (t) => [index("page_updates_page").on(t.pageId, t.seq)],
);

/** The compacted base of a page: everything whose rows have been taken out of the log. */
export const pageStates = pgTable("page_states", {
  pageId: uuid("page_id")
    .primaryKey()
    .references(() => pages.id, { onDelete: "cascade" }),
  epoch: integer("epoch").notNull(),
  state: bytea("state").notNull(),
  /** Number of log rows folded in so far, and the exact sequence numbers of the last fold. */
  folded: bigint("folded", { mode: "bigint" }).notNull(),
  covered: jsonb("covered").$type<string[]>().notNull(),
  at: at("at").notNull().defaultNow(),
});

/** Which person a Yjs client id belongs to, first come. */
export const pageClients = pgTable(
  "page_clients",
  {
    pageId: uuid("page_id")
      .notNull()
      .references(() => pages.id, { onDelete: "cascade" }),
    clientId: bigint("client_id", { mode: "bigint" }).notNull(),
    userId: uuid("user_id"),
  },
  (t) => [primaryKey({ columns: [t.pageId, t.clientId] })],
);

/** Append-only record of amendments, set-asides and assumed σ, written in the edit's own transaction. */
export const amendmentLog = pgTable(
  "amendment_log",
  {
    id: bigserial("id", { mode: "bigint" }).primaryKey(),
    pageId: uuid("page_id")
      .notNull()
      .references(() => pages.id, { onDelete: "cascade" }),
    blockKey: text("block_key").notNull(),
    /** `amendments`, `setAside`, `assumed`, `leaveOut`. */
    list: text("list").notNull(),
    entryKey: text("entry_key").notNull(),
    before: jsonb("before"),
    after: jsonb("after"),
    reason: text("reason"),
    userId: uuid("user_id"),
    at: at("at").notNull().defaultNow(),
  },
  (t) => [index("amendment_log_page").on(t.pageId)],
);
