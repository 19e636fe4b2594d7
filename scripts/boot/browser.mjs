import { spawnSync } from "node:child_process";
import { existsSync, writeFileSync } from "node:fs";
import path from "node:path";
import { aptInstall, unpackDebian, unpackedLibraries, unpackedRoot } from "./debian.mjs";
import { fail, home, isRoot } from "./shared.mjs";

/**
 * Debian's Chromium, for the browser tests: installed as root, unpacked beside the data as anybody else.
 *
 * @returns {{ CHROMIUM: string, CHROMIUM_LIBRARIES?: string, CHROMIUM_FONTS?: string }}
 */
export function ensureBrowser() {
  const given = process.env.CHROMIUM;
  if (given) return existsSync(given) ? { CHROMIUM: given } : fail(`CHROMIUM names ${given}, which is not there.`);
  const unpacked = path.join(unpackedRoot(), "usr/lib/chromium/chromium");
  const installed = "/usr/bin/chromium";
  if (!existsSync(installed) && !existsSync(unpacked)) {
    if (isRoot) aptInstall(["chromium"], "Chromium could not be installed");
    else
      unpackDebian(
        "chromium",
        "The browser tests need Chromium, which could not be unpacked: as root, `apt-get install chromium`; or name one with CHROMIUM=/path.",
      );
  }
  const found = existsSync(installed)
    ? { CHROMIUM: installed }
    : { CHROMIUM: unpacked, CHROMIUM_LIBRARIES: unpackedLibraries(), CHROMIUM_FONTS: unpackedFonts() };
  const beside = found.CHROMIUM_LIBRARIES ? { LD_LIBRARY_PATH: found.CHROMIUM_LIBRARIES, FONTCONFIG_FILE: found.CHROMIUM_FONTS } : {};
  const probe = spawnSync(found.CHROMIUM, ["--version"], { env: { ...process.env, ...beside }, encoding: "utf8" });
  if (probe.status !== 0)
    fail(`${found.CHROMIUM} does not start: ${(probe.stderr || "").trim().split("\n")[0]}. Install Chromium with \`apt-get install chromium\` as root.`);
  return found;
}

/**
 * A font configuration for the unpacked browser. It ends at the first letter where it finds no font at all, and refuses some of
 * the fonts that a page brings where nothing says which of the machine's is sans and which is serif.
 */
function unpackedFonts() {
  const file = path.join(home(), "fonts.conf");
  const rules = path.join(unpackedRoot(), "usr/share/fontconfig/conf.avail");
  const lines = [
    ...[path.join(unpackedRoot(), "usr/share/fonts"), "/usr/share/fonts"].map((folder) => `<dir>${folder}</dir>`),
    ...["45-latin", "49-sansserif", "60-latin"].map((rule) => `<include ignore_missing="yes">${path.join(rules, `${rule}.conf`)}</include>`),
    `<cachedir>${path.join(home(), "fontcache")}</cachedir>`,
  ];
  writeFileSync(file, `<?xml version="1.0"?>\n<!DOCTYPE fontconfig SYSTEM "urn:fontconfig:fonts.dtd">\n<fontconfig>\n  ${lines.join("\n  ")}\n</fontconfig>\n`);
  return file;
}
