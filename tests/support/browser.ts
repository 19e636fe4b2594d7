import { readFileSync } from "node:fs";
import path from "node:path";
import { chromium, type Browser } from "playwright-core";

/** Headless Chromium of Debian's, with software WebGL and no request to anywhere of its own. */
export function launchBrowser(): Promise<Browser> {
  const { CHROMIUM, CHROMIUM_LIBRARIES } = bootFile();
  return chromium.launch({
    executablePath: CHROMIUM ?? "/usr/bin/chromium",
    headless: true,
    env: { ...process.env, ...(CHROMIUM_LIBRARIES ? { LD_LIBRARY_PATH: CHROMIUM_LIBRARIES } : {}) } as Record<string, string>,
    args: [
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });
}

/** What the boot found or unpacked. */
function bootFile(): { CHROMIUM?: string; CHROMIUM_LIBRARIES?: string } {
  return JSON.parse(readFileSync(path.resolve(import.meta.dirname, "../../.data/test.json"), "utf8")) as { CHROMIUM?: string; CHROMIUM_LIBRARIES?: string };
}
