import { readFileSync } from "node:fs";
import path from "node:path";
import { chromium, type Browser } from "playwright-core";

/** Headless Chromium of Debian's, with software WebGL and no request to anywhere of its own. */
export function launchBrowser(): Promise<Browser> {
  const { CHROMIUM, CHROMIUM_LIBRARIES, CHROMIUM_FONTS } = bootFile();
  const unpacked = CHROMIUM_LIBRARIES ? { LD_LIBRARY_PATH: CHROMIUM_LIBRARIES, FONTCONFIG_FILE: CHROMIUM_FONTS } : {};
  return chromium.launch({
    executablePath: CHROMIUM ?? "/usr/bin/chromium",
    headless: true,
    env: { ...process.env, ...unpacked } as Record<string, string>,
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

interface BootFile {
  readonly CHROMIUM?: string;
  readonly CHROMIUM_LIBRARIES?: string;
  readonly CHROMIUM_FONTS?: string;
}

/** What the boot found or unpacked. */
function bootFile(): BootFile {
  return JSON.parse(readFileSync(path.resolve(import.meta.dirname, "../../.data/test.json"), "utf8")) as BootFile;
}
