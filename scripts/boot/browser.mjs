import { existsSync } from "node:fs";
import { aptInstall } from "./debian.mjs";
import { fail, isRoot, log } from "./shared.mjs";

const browsers = ["/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"];

/** Debian's Chromium, for the browser tests. */
export function ensureBrowser() {
  const given = process.env.CHROMIUM;
  if (given && !existsSync(given)) fail(`CHROMIUM names ${given}, which is not there.`);
  if (given || browsers.some((file) => existsSync(file))) return;
  if (!isRoot) fail("The browser tests need Chromium: install it with `apt-get install chromium`, or name one with CHROMIUM=/path.");
  aptInstall(["chromium"], "Chromium could not be installed");
  log("Chromium is there");
}
