import "server-only";
import { connect, type Connection } from "@/db/client";

// One pool a process, also when the development server loads this file again.
const kept = globalThis as typeof globalThis & { cotecticConnection?: Connection };

/** The application's connection to PostgreSQL, opened at its first use. */
export function connection(): Connection {
  if (!kept.cotecticConnection) {
    const url = process.env.DATABASE_URL;
    if (!url) throw new Error("DATABASE_URL is not set; see .env.example");
    kept.cotecticConnection = connect(url);
  }
  return kept.cotecticConnection;
}

export function database(): Connection["db"] {
  return connection().db;
}
