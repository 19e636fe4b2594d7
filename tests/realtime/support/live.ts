import type pg from "pg";
import { addPage } from "@/db/queries/pages";
import { createSession } from "@/db/queries/sessions";
import type { PageDocument } from "@/cells";
import { encodeNewPage } from "@/realtime/document";
import { usualTimes, type RealtimeTimes } from "@/realtime/config";
import { startRealtime, type RunningRealtime } from "@/realtime/realtime";
import { someGroup } from "../../db/world";
import { testDatabase, type TestDatabase } from "../../support/database";

export const ORIGIN = "http://pages.test";

/** A page with a table of one amended value, a formula and a note. */
export const samplePage: PageDocument = {
  format: "cotectic-page/1",
  title: "Chondrites",
  blocks: [
    { kind: "data", id: "bulk", typed: [{ id: "a", cells: { Mg: "14.2", Si: "16.4" } }] },
    { kind: "formula", id: "ratios", data: "bulk", text: "mg_si = Mg / Si" },
    { kind: "note", id: "remark", text: "A note." },
  ],
};

export interface Live {
  readonly database: TestDatabase;
  readonly port: number;
  readonly groupId: string;
  readonly pageId: string;
  readonly lead: string;
  readonly analyst: string;
  readonly reader: string;
  /** A `Cookie` header with a fresh session of that person. */
  cookieOf(userId: string): Promise<string>;
  newPage(page?: PageDocument): Promise<string>;
  query<R extends pg.QueryResultRow>(text: string, values?: unknown[]): Promise<R[]>;
  stop(): Promise<void>;
}

export type Stand = Omit<Live, "port" | "stop"> & { drop(): Promise<void> };

/** A database with a group and a page, and no server yet. */
export async function stand(): Promise<Stand> {
  const database = await testDatabase();
  const world = await someGroup(database.db);
  const newPage = (page: PageDocument = samplePage) =>
    addPage(database.db, { groupId: world.groupId, title: page.title, outline: [], by: world.lead, update: encodeNewPage(page) });
  return {
    database,
    ...world,
    pageId: await newPage(),
    newPage,
    cookieOf: async (userId) => `cotectic-session=${(await createSession(database.db, userId)).token}`,
    query: async <R extends pg.QueryResultRow>(text: string, values: unknown[] = []) => (await database.pool.query<R>(text, values)).rows,
    drop: () => database.drop(),
  };
}

/** A realtime server over a fresh database, in this process. */
export async function live(times: Partial<RealtimeTimes> = {}): Promise<Live> {
  const standing = await stand();
  const server: RunningRealtime = await startRealtime({
    databaseUrl: standing.database.url,
    host: "127.0.0.1",
    port: 0,
    origins: [ORIGIN],
    secure: false,
    times: { ...usualTimes, ...times },
  });
  return {
    ...standing,
    port: server.port,
    stop: async () => {
      await server.close();
      await standing.drop();
    },
  };
}
