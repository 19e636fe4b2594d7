import { execFileSync } from "node:child_process";
import { createHash } from "node:crypto";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { Worker } from "node:worker_threads";
import { build } from "esbuild";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { launchBrowser } from "../../support/browser";
import { evaluateWhole } from "./evaluateWhole";

/**
 * One page, the same bytes everywhere: Node's main thread, a worker thread and Chromium, as machine code and interpreted. Without
 * WebAssembly the engine interprets; so it does under a policy that does not allow to generate code.
 */
const root = path.resolve(import.meta.dirname, "../../..");
const sha256 = (text: string): string => createHash("sha256").update(text).digest("hex");
let folder: string;
let bundle: string;
let expected: string;
let web: Server;
let origin: string;
let browser: Browser;

/** As the shipped policy has it, and without its leave to generate code. */
const policies: Readonly<Record<string, string>> = {
  "/machine/": "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'; worker-src 'self'",
  "/interpreter/": "default-src 'none'; script-src 'self'; worker-src 'self'",
};

beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), "cotectic-identical-"));
  const { outputFiles } = await build({
    stdin: { contents: `export { evaluateWhole } from "./tests/cells/identical/evaluateWhole";`, resolveDir: root, loader: "ts" },
    bundle: true,
    format: "esm",
    platform: "neutral",
    mainFields: ["module", "main"],
    alias: { "@": root },
    write: false,
  });
  bundle = outputFiles[0]?.text ?? "";
  writeFileSync(path.join(folder, "whole.mjs"), bundle);
  // Hidden before anything of the engine is loaded.
  const without = `globalThis.WebAssembly = undefined;\n`;
  const say = (how: string): string => `const { evaluateWhole } = await import("./whole.mjs");\n${how}\n`;
  writeFileSync(path.join(folder, "main-machine.mjs"), say("process.stdout.write(evaluateWhole());"));
  writeFileSync(path.join(folder, "main-interpreter.mjs"), without + say("process.stdout.write(evaluateWhole());"));
  const thread = `import { parentPort } from "node:worker_threads";\n`;
  writeFileSync(path.join(folder, "thread-machine.mjs"), thread + say("parentPort.postMessage(evaluateWhole());"));
  writeFileSync(path.join(folder, "thread-interpreter.mjs"), thread + without + say("parentPort.postMessage(evaluateWhole());"));
  expected = evaluateWhole();
  web = createServer((request, response) => {
    const url = request.url ?? "/";
    const policy = Object.entries(policies).find(([start]) => url.startsWith(start))?.[1] ?? "default-src 'none'";
    const script = url.endsWith("whole.mjs") ? bundle : url.endsWith("worker.mjs") ? say("postMessage(evaluateWhole());") : null;
    response.writeHead(200, { "content-type": script === null ? "text/html" : "text/javascript", "content-security-policy": policy });
    response.end(script ?? "<!doctype html><title>empty</title>");
  });
  await new Promise<void>((resolve) => web.listen(0, "127.0.0.1", resolve));
  origin = `http://127.0.0.1:${(web.address() as AddressInfo).port.toString()}`;
  browser = await launchBrowser();
}, 120_000);

afterAll(async () => {
  await browser.close();
  await new Promise((resolve) => web.close(resolve));
  rmSync(folder, { recursive: true, force: true });
});

function inThread(file: string): Promise<string> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(path.join(folder, file));
    worker.once("message", (text: string) => {
      resolve(text);
      void worker.terminate();
    });
    worker.once("error", reject);
  });
}

/** In a worker, as the product does it; and whether machine code could be made there. */
async function inChromium(place: string): Promise<{ text: string; makesCode: boolean }> {
  const page = await (await browser.newContext()).newPage();
  await page.goto(`${origin}${place}`);
  const found = await page.evaluate(async () => {
    const empty = Uint8Array.of(0, 0x61, 0x73, 0x6d, 1, 0, 0, 0);
    const makesCode = await WebAssembly.compile(empty).then(
      () => true,
      () => false,
    );
    const text = await new Promise<string>((resolve, reject) => {
      const worker = new window.Worker("worker.mjs", { type: "module" });
      worker.onmessage = ({ data }: MessageEvent) => resolve(String(data));
      worker.onerror = (event) => reject(new Error(event.message));
    });
    return { text, makesCode };
  });
  await page.context().close();
  return found;
}

describe("one page gives the same bytes", () => {
  it.each(["machine", "interpreter"])("in a process of its own, by the %s", (by) => {
    const text = execFileSync(process.execPath, [path.join(folder, `main-${by}.mjs`)], { encoding: "utf8", maxBuffer: 1 << 28 });
    expect(sha256(text)).toBe(sha256(expected));
  });

  it.each(["machine", "interpreter"])("in a worker thread, by the %s", async (by) => {
    expect(sha256(await inThread(`thread-${by}.mjs`))).toBe(sha256(expected));
  });

  it("in Chromium, as machine code under the policy that is shipped", async () => {
    const { text, makesCode } = await inChromium("/machine/");
    expect(makesCode).toBe(true);
    expect(sha256(text)).toBe(sha256(expected));
  });

  it("in Chromium, interpreted where no code may be generated", async () => {
    const { text, makesCode } = await inChromium("/interpreter/");
    expect(makesCode).toBe(false);
    expect(sha256(text)).toBe(sha256(expected));
  });

  it("and its results say much: every line calculated, machine code where rows are many", () => {
    expect(expected.length).toBeGreaterThan(5_000_000);
    expect(expected).not.toContain('"severity":"error"');
  });
});
