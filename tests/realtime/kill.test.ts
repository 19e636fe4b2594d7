import fc from "fast-check";
import { afterAll, beforeAll, expect, test } from "vitest";
import * as Y from "yjs";
import { committedPage } from "@/db/queries/pages";
import { seed } from "../support/seed";
import { stand, type Stand } from "./support/live";
import { nodeClient, type NodeClient } from "./support/nodeClient";
import { Relay, serverProcess, type ServerProcess } from "./support/processes";
import { pause, textOf } from "./support/rawSocket";

const ROUNDS = 10;

let s: Stand;
const started: ServerProcess[] = [];
const start = async () => {
  const server = await serverProcess(s.database.url);
  started.push(server);
  return server;
};
beforeAll(async () => {
  s = await stand();
});
afterAll(async () => {
  await Promise.all(started.map((server) => server.kill()));
  await s.drop();
});

/** What the database has of the text, asked beside every server. */
async function committed(): Promise<string> {
  const page = await committedPage(s.database.db, s.pageId);
  const doc = new Y.Doc();
  for (const update of page?.updates ?? []) Y.applyUpdate(doc, update);
  return textOf(doc, "remark").toString();
}

const marksOf = (text: string, who: string): string[] => text.match(new RegExp(`<${who}\\d+>`, "g")) ?? [];

/** Somebody who types marks that can be told apart. */
class Typist {
  made = 0;
  private timer: NodeJS.Timeout | null = null;

  constructor(
    readonly who: string,
    readonly client: NodeClient,
  ) {}

  begin(): void {
    this.timer = setInterval(() => this.client.type("remark", `<${this.who}${(this.made++).toString()}>`), 12);
  }

  end(): void {
    if (this.timer !== null) clearInterval(this.timer);
  }

  /** Marks that receipts cover: all but the last few that wait. */
  get acknowledged(): string[] {
    return Array.from({ length: this.made - this.client.save.waiting }, (_, n) => `<${this.who}${n.toString()}>`);
  }
}

test(`S3 in ${ROUNDS.toString()} rounds of kill -9 while two people type, no acknowledged edit is lost and nobody has seen one that is gone`, async () => {
  const relay = await new Relay().open();
  let server = await start();
  relay.lead(server.port);
  const typists = await Promise.all(
    [["a", s.lead] as const, ["b", s.analyst] as const].map(async ([who, id]) => {
      const client = nodeClient({ port: relay.port, pageId: s.pageId, cookie: await s.cookieOf(id), user: { id, name: who } });
      await client.until(() => client.save.kind === "saved");
      return new Typist(who, client);
    }),
  );
  const delays = fc.sample(fc.integer({ min: 250, max: 900 }), { seed, numRuns: ROUNDS });
  let acknowledgedUnderWay = 0;
  for (const delay of delays) {
    for (const typist of typists) typist.begin();
    const next = start();
    await pause(delay);
    await server.kill();
    relay.lead(null);
    await pause(30);
    const kept = await committed();
    for (const { who, acknowledged, client, made } of typists) {
      const have = new Set(marksOf(kept, who));
      expect(acknowledged.filter((mark) => !have.has(mark))).toStrictEqual([]);
      for (const other of typists) {
        if (other.client === client) continue;
        const seen = marksOf(client.textOf("remark"), other.who);
        const there = new Set(marksOf(kept, other.who));
        expect(seen.filter((mark) => !there.has(mark))).toStrictEqual([]);
      }
      if (acknowledged.length > 0 && acknowledged.length < made) acknowledgedUnderWay += 1;
    }
    for (const typist of typists) typist.end();
    server = await next;
    relay.lead(server.port);
    for (const { client } of typists) await client.until(() => client.save.kind === "saved", 20_000);
  }
  for (const { client } of typists) client.close();
  const text = await committed();
  for (const { who, made } of typists) {
    expect(made).toBeGreaterThan(100);
    // Every edit ever made arrived, once, in its order: what was not acknowledged came with the next connection.
    expect(marksOf(text, who)).toStrictEqual(Array.from({ length: made }, (_, n) => `<${who}${n.toString()}>`));
  }
  // The kills fell while edits were under way; otherwise this test proves nothing.
  expect(acknowledgedUnderWay).toBeGreaterThan(ROUNDS / 2);
  await relay.close();
  expect(await server.stop()).toBe(0);
}, 180_000);
