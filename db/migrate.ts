import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import path from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import pg from "pg";
import { grantRights, quote } from "./grants";

/** Any number, as long as it is always this one: two migrations at once wait for each other. */
const LOCK = 7_231_907;
const folder = path.join(path.dirname(fileURLToPath(import.meta.url)), "migrations");

/**
 * Brings a database to the present schema and gives the application's role its rights. Repeating it changes nothing.
 *
 * @param ownerUrl connection of the role that owns the tables
 * @param applicationUrl connection the application uses; its role is made when it does not exist and the owner may make roles
 */
export async function migrateDatabase(ownerUrl: string, applicationUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    await client.query("select pg_advisory_lock($1)", [LOCK]);
    await migrate(drizzle(client), { migrationsFolder: folder });
    const { rows } = await client.query<{ owner: string }>("select current_user as owner");
    const application = new URL(applicationUrl);
    const role = decodeURIComponent(application.username);
    if (role !== "" && role !== rows[0]?.owner) {
      await ensureRole(client, role, decodeURIComponent(application.password));
      await grantRights(client, role);
    }
  } finally {
    await client.end();
  }
}

async function ensureRole(client: pg.Client, role: string, password: string): Promise<void> {
  const { rowCount } = await client.query("select 1 from pg_roles where rolname = $1", [role]);
  if (rowCount) return;
  await client.query(`create role ${quote(role)} login password ${client.escapeLiteral(password)}`);
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const application = process.env.DATABASE_URL;
  if (!application) {
    console.error("DATABASE_URL is not set. Set it to the connection the application uses; see .env.example.");
    process.exit(2);
  }
  await migrateDatabase(process.env.MIGRATION_DATABASE_URL ?? application, application);
}
