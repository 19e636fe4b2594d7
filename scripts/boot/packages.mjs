import { existsSync, readFileSync } from "node:fs";
import { log, run } from "./shared.mjs";

/** `npm ci`, unless node_modules already holds what package-lock.json says. */
export async function ensurePackages() {
  if (isInstalled()) return;
  log("installing npm packages (a minute or so)");
  run(
    "npm",
    ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"],
    {},
    "The npm packages could not be installed; is the npm registry in reach?",
  );
}

/** Compares with the list npm itself keeps of what it installed, so that a package added by hand costs no second install. */
function isInstalled() {
  const kept = "node_modules/.package-lock.json";
  if (!existsSync(kept)) return false;
  const wanted = JSON.parse(readFileSync("package-lock.json", "utf8")).packages;
  const there = JSON.parse(readFileSync(kept, "utf8")).packages;
  return Object.entries(wanted).every(([place, { version, optional }]) => place === "" || optional === true || there[place]?.version === version);
}
