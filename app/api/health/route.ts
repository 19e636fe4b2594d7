import { sql } from "drizzle-orm";
import { database } from "@/app/_server/database";
import { json, route } from "@/app/_server/route";

/** Says that the web process serves and reaches its database. */
export const GET = route(async () => {
  await database().execute(sql`select 1`);
  return json({ ok: true });
});
