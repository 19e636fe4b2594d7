import { createHash } from "node:crypto";
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { log, run } from "./shared.mjs";

const stampFile = "node_modules/.cotectic-lock";

/** `npm ci`, unless node_modules already is what package-lock.json says. */
export async function ensurePackages() {
  const wanted = createHash("sha256").update(readFileSync("package-lock.json")).digest("hex");
  if (existsSync(stampFile) && readFileSync(stampFile, "utf8") === wanted) return;
  log("installing npm packages (half a minute or so)");
  run("npm", ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"], {}, "The npm packages could not be installed; is the npm registry in reach?");
  writeFileSync(stampFile, wanted);
}
