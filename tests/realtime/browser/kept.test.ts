import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import path from "node:path";
import { build } from "esbuild";
import type { Browser, BrowserContext, Page } from "playwright-core";
import { afterAll, beforeAll, expect, test } from "vitest";
import type { Save } from "@/realtime/client";
import { notifyAccess } from "@/db/queries/accessEvents";
import { usualTimes } from "@/realtime/config";
import { startRealtime, type RunningRealtime } from "@/realtime/realtime";
import { join, somebody } from "../../db/world";
import { launchBrowser } from "../../support/browser";
import { stand, type Stand } from "../support/live";
import { Relay } from "../support/processes";
import { RawSocket } from "../support/rawSocket";

/** What the client keeps in a real browser: IndexedDB and localStorage (rules S4, A6). */
interface InPage {
  open(ask: { pageId: string; userId: string; mayEdit: boolean; epoch?: number }): Promise<void>;
  type(text: string): void;
  text(): string;
  save(): Save;
  state(): { isReady: boolean; ended: string | null; drafts: { edits: number; why: string; text: string }[] };
  discard(): Promise<void>;
  close(): void;
  hasUnsent(): boolean;
  purge(): Promise<void>;
  databases(): Promise<string[]>;
}
declare global {
  interface Window {
    live: InPage;
  }
}

const script = (port: number) => `
import { connectPage, hasUnsentEdits, purgeUnsentEdits } from "@/realtime/client";
let page, isReady = false, ended = null, drafts = [];
const textOf = (doc) => [...doc.getMap("blocks").values()].find((b) => b.get("id") === "remark").get("text");
window.live = {
  open: ({ pageId, userId, mayEdit, epoch = 1 }) => new Promise((resolve) => {
    isReady = false; ended = null; drafts = [];
    page = connectPage({ url: "ws://127.0.0.1:${port.toString()}", pageId, epoch, user: { id: userId, name: "Me" }, mayEdit }, {
      onSave: () => undefined,
      onReady: () => { isReady = true; resolve(); },
      onEnded: (sentence) => { ended = sentence; resolve(); },
      onDrafts: (found) => { drafts = found; },
    });
  }),
  type: (text) => { const t = textOf(page.doc); t.insert(t.length, text); },
  text: () => textOf(page.doc).toString(),
  save: () => page.save,
  state: () => ({ isReady, ended, drafts: drafts.map((d) => ({ edits: d.edits, why: d.why, text: d.document.blocks.find((b) => b.id === "remark").text })) }),
  discard: async () => { for (const d of drafts) await d.discard(); },
  close: () => page.close(),
  hasUnsent: () => hasUnsentEdits(),
  purge: () => purgeUnsentEdits(),
  databases: async () => (await indexedDB.databases()).map((d) => d.name).filter((name) => name.includes("/page/")),
};`;

let s: Stand;
let server: RunningRealtime;
let relay: Relay;
let web: Server;
let origin: string;
let browser: Browser;

beforeAll(async () => {
  s = await stand();
  relay = await new Relay().open();
  const bundle = await build({
    stdin: { contents: script(relay.port), resolveDir: path.resolve(import.meta.dirname, "../../.."), loader: "ts" },
    bundle: true,
    write: false,
    format: "iife",
    platform: "browser",
    tsconfig: path.resolve(import.meta.dirname, "../../../tsconfig.json"),
    logLevel: "error",
  });
  const js = bundle.outputFiles[0]?.text ?? "";
  web = createServer((request, response) => {
    if (request.url === "/live.js") response.writeHead(200, { "content-type": "text/javascript" }).end(js);
    else response.writeHead(200, { "content-type": "text/html" }).end('<!doctype html><link rel="icon" href="data:,"><script src="/live.js"></script>');
  });
  await new Promise<void>((resolve) => web.listen(0, "127.0.0.1", resolve));
  origin = `http://127.0.0.1:${(web.address() as AddressInfo).port.toString()}`;
  server = await startRealtime({
    databaseUrl: s.database.url,
    host: "127.0.0.1",
    port: 0,
    origins: [origin],
    secure: false,
    times: { ...usualTimes, banMs: 200 },
  });
  relay.lead(server.port);
  browser = await launchBrowser();
});
afterAll(async () => {
  await browser.close();
  await server.close();
  await relay.close();
  await new Promise((resolve) => web.close(resolve));
  await s.drop();
});

/** A browser in which somebody of the group is signed in, who belongs to one test. */
async function person(): Promise<{ id: string; context: BrowserContext; tab: () => Promise<Page> }> {
  const id = await somebody(s.database.db);
  await join(s.database.db, s.groupId, id, "analyst");
  const context = await browser.newContext();
  const [name = "", value = ""] = (await s.cookieOf(id)).split("=");
  await context.addCookies([{ name, value, url: origin, httpOnly: true }]);
  const tab = async () => {
    const page = await context.newPage();
    await page.goto(origin);
    return page;
  };
  return { id, context, tab };
}

const saved = (tab: Page) => tab.waitForFunction(() => window.live.save().kind === "saved");
const offline = async (tab: Page) => {
  relay.lead(null);
  relay.cut();
  await tab.waitForFunction(() => window.live.save().kind === "offline");
};
const online = () => relay.lead(server.port);
const stored = async (pageId: string): Promise<string> => {
  const one = new RawSocket({ port: server.port, pageId, cookie: await s.cookieOf(s.reader), origin });
  await one.opened();
  await one.sync();
  const text = one.textOf("remark");
  await one.close();
  return text;
};

test("S4 edits made offline are still in the browser after the tab was closed, are counted, and arrive at the next visit", async () => {
  const { id, context, tab } = await person();
  const pageId = await s.newPage();
  const one = await tab();
  await one.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  await saved(one);
  expect(await one.evaluate(() => window.live.hasUnsent())).toBe(false);
  await offline(one);
  await one.evaluate(() => [" One.", " Two."].forEach((text) => window.live.type(text)));
  expect(await one.evaluate(() => window.live.save().text)).toBe("Offline, 2 edits waiting");
  await one.waitForTimeout(150);
  await one.close();
  // Still offline: the page opens from this browser's own store.
  const two = await tab();
  expect(await two.evaluate(() => window.live.hasUnsent())).toBe(true);
  await two.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  expect(await two.evaluate(() => window.live.text())).toBe("A note. One. Two.");
  expect(await two.evaluate(() => window.live.save().waiting)).toBe(2);
  online();
  await saved(two);
  expect(await stored(pageId)).toBe("A note. One. Two.");
  expect(await two.evaluate(() => window.live.hasUnsent())).toBe(false);
  await context.close();
});

test("S4 signing out can warn of unsent edits, and purges what this browser keeps", async () => {
  const { id, context, tab } = await person();
  const pageId = await s.newPage();
  const one = await tab();
  await one.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  await saved(one);
  await offline(one);
  await one.evaluate(() => window.live.type(" Lost knowingly."));
  expect(await one.evaluate(() => window.live.hasUnsent())).toBe(true);
  expect(await one.evaluate(() => window.live.databases())).toHaveLength(1);
  await one.evaluate(() => window.live.purge());
  expect(await one.evaluate(() => window.live.hasUnsent())).toBe(false);
  await one.close();
  const two = await tab();
  expect(await two.evaluate(() => window.live.databases())).toStrictEqual([]);
  online();
  await two.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  await saved(two);
  expect(await two.evaluate(() => window.live.text())).toBe("A note.");
  await context.close();
});

test("A6 who lost the right to edit while offline gets the server's page and a draft, which never merges, not even with the right back", async () => {
  const { id, context, tab } = await person();
  const pageId = await s.newPage();
  const role = async (to: string) => {
    await s.query("update memberships set role = $2::role where user_id = $1", [id, to]);
    await notifyAccess(s.database.db, { groupId: s.groupId, userId: id });
  };
  const one = await tab();
  await one.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  await saved(one);
  await offline(one);
  await one.evaluate(() => window.live.type(" Mine."));
  await role("reader");
  online();
  await one.waitForFunction(() => window.live.state().ended !== null);
  expect(await one.evaluate(() => window.live.save())).toMatchObject({ kind: "refused", waiting: 1 });
  await one.close();

  const two = await tab();
  await two.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: false });
  expect(await two.evaluate(() => window.live.text())).toBe("A note.");
  await two.waitForFunction(() => window.live.state().drafts.length > 0);
  expect(await two.evaluate(() => window.live.state().drafts)).toMatchObject([{ edits: 1, text: "A note. Mine." }]);
  await two.close();

  await role("analyst");
  const three = await tab();
  await three.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
  await saved(three);
  await three.evaluate(() => window.live.type(" New."));
  await saved(three);
  expect(await stored(pageId)).toBe("A note. New.");
  await three.waitForFunction(() => window.live.state().drafts.length > 0);
  await three.evaluate(() => window.live.discard());
  expect(await three.evaluate(() => window.live.databases())).toHaveLength(1);
  await three.close();
  await context.close();
});

test("S4 who may only read keeps nothing in the browser", async () => {
  const { id, context, tab } = await person();
  await s.query("update memberships set role = 'reader' where user_id = $1", [id]);
  const one = await tab();
  await one.evaluate((ask) => window.live.open(ask), { pageId: s.pageId, userId: id, mayEdit: false });
  expect(await one.evaluate(() => window.live.text())).toBe("A note.");
  expect(await one.evaluate(() => window.live.databases())).toStrictEqual([]);
  await context.close();
});

test("A5 two tabs of one person meet through the server alone, and both are saved", async () => {
  const { id, context, tab } = await person();
  const pageId = await s.newPage();
  const [one, two] = [await tab(), await tab()];
  for (const t of [one, two]) {
    await t.evaluate((ask) => window.live.open(ask), { pageId, userId: id, mayEdit: true });
    await saved(t);
  }
  await offline(one);
  await one.evaluate(() => window.live.type(" Not yet."));
  await two.waitForTimeout(200);
  expect(await two.evaluate(() => window.live.text())).toBe("A note.");
  online();
  await saved(one);
  await two.waitForFunction(() => window.live.text() === "A note. Not yet.");
  await context.close();
});
