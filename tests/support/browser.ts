import { existsSync } from "node:fs";
import { chromium, type Browser } from "playwright-core";

const found = [process.env.CHROMIUM, "/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"].find((file) => file !== undefined && existsSync(file));

/** Headless Chromium of Debian's, with software WebGL and no request to anywhere of its own. */
export function launchBrowser(): Promise<Browser> {
  if (!found) throw new Error("no Chromium: `apt-get install chromium`, or name one with CHROMIUM=/path");
  return chromium.launch({
    executablePath: found,
    headless: true,
    args: ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking", "--disable-component-update", "--disable-sync"],
  });
}
