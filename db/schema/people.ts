import { bigint, boolean, index, integer, pgEnum, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from "drizzle-orm/pg-core";

const at = (name: string) => timestamp(name, { withTimezone: true, mode: "date" });

export const roleEnum = pgEnum("role", ["lead", "analyst", "reader"]);

/** A person. Names of people live in this one erasable row; everything else refers to the opaque id. */
export const users = pgTable("users", {
  id: uuid("id").primaryKey().defaultRandom(),
  name: text("name"),
  /** Nullable: not every identity provider gives one. Stored lower-cased. */
  email: text("email").unique(),
  emailVerified: at("email_verified"),
  image: text("image"),
  passwordHash: text("password_hash"),
  createdAt: at("created_at").notNull().defaultNow(),
});

/** Accounts at identity providers, as the next-auth adapter wants them. */
export const accounts = pgTable(
  "accounts",
  {
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    type: text("type").notNull(),
    provider: text("provider").notNull(),
    providerAccountId: text("provider_account_id").notNull(),
    refresh_token: text("refresh_token"),
    access_token: text("access_token"),
    expires_at: integer("expires_at"),
    token_type: text("token_type"),
    scope: text("scope"),
    id_token: text("id_token"),
    session_state: text("session_state"),
  },
  (t) => [primaryKey({ columns: [t.provider, t.providerAccountId] })],
);

/** Signed-in sessions. The token is stored as its SHA-256, so that a read of this table lets nobody in. */
export const sessions = pgTable(
  "sessions",
  {
    sessionToken: text("session_token").primaryKey(),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    expires: at("expires").notNull(),
    createdAt: at("created_at").notNull().defaultNow(),
  },
  (t) => [index("sessions_user").on(t.userId)],
);

export const verificationTokens = pgTable(
  "verification_tokens",
  { identifier: text("identifier").notNull(), token: text("token").notNull(), expires: at("expires").notNull() },
  (t) => [primaryKey({ columns: [t.identifier, t.token] })],
);

export const groups = pgTable("groups", {
  id: uuid("id").primaryKey().defaultRandom(),
  name: text("name").notNull(),
  /** True for the group that `npm start` makes, whose people and finds are invented. */
  demo: boolean("demo").notNull().default(false),
  createdAt: at("created_at").notNull().defaultNow(),
});

export const memberships = pgTable(
  "memberships",
  {
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    role: roleEnum("role").notNull(),
    joinedAt: at("joined_at").notNull().defaultNow(),
    lastSeenAt: at("last_seen_at"),
  },
  (t) => [primaryKey({ columns: [t.groupId, t.userId] }), index("memberships_user").on(t.userId)],
);

/** An invitation by mail. The mailed secret is stored as its SHA-256. */
export const invitations = pgTable(
  "invitations",
  {
    id: uuid("id").primaryKey().defaultRandom(),
    groupId: uuid("group_id")
      .notNull()
      .references(() => groups.id, { onDelete: "cascade" }),
    email: text("email").notNull(),
    role: roleEnum("role").notNull(),
    tokenHash: text("token_hash").notNull(),
    invitedBy: uuid("invited_by").references(() => users.id, { onDelete: "set null" }),
    createdAt: at("created_at").notNull().defaultNow(),
    expiresAt: at("expires_at").notNull(),
    acceptedAt: at("accepted_at"),
    withdrawnAt: at("withdrawn_at"),
  },
  (t) => [uniqueIndex("invitations_token").on(t.tokenHash), index("invitations_group").on(t.groupId)],
);

/** Counters of the rate limiter (rate-limiter-flexible's own layout). */
export const rateLimits = pgTable("rate_limits", {
  key: text("key").primaryKey(),
  points: integer("points").notNull().default(0),
  expire: bigint("expire", { mode: "number" }),
});
