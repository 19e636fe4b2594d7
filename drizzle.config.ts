import { defineConfig } from "drizzle-kit";

export default defineConfig({
  dialect: "postgresql",
  schema: ["./db/schema/people.ts", "./db/schema/pages.ts", "./db/schema/snapshots.ts", "./db/schema/bodies.ts"],
  out: "./db/migrations",
  dbCredentials: { url: process.env.DATABASE_URL ?? "postgres://127.0.0.1/cotectic" },
});
