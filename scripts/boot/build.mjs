import { createHash } from "node:crypto";
import { existsSync, readFileSync, readdirSync, writeFileSync } from "node:fs";
import path from "node:path";
import { childEnv, log, root, run } from "./shared.mjs";

const stampFile = ".next/.cotectic-sources";
const folders = ["app", "cells", "realtime", "db", "public"];
const files = ["next.config.ts", "tailwind.config.ts", "postcss.config.mjs", "proxy.ts", "tsconfig.json", "package-lock.json"];

/** `next build`, unless nothing it reads has changed since the last one. */
export function ensureBuild(environment) {
  const hash = createHash("sha256");
  for (const file of [...folders.flatMap(walk), ...files].filter((name) => existsSync(path.join(root, name))))
    hash.update(file).update(readFileSync(path.join(root, file)));
  const wanted = hash.digest("hex");
  if (existsSync(stampFile) && readFileSync(stampFile, "utf8") === wanted) return;
  log("building (half a minute or so)");
  run("node", ["node_modules/next/dist/bin/next", "build"], { env: { ...childEnv(), ...environment, NEXT_TELEMETRY_DISABLED: "1" } }, "The build failed");
  writeFileSync(stampFile, wanted);
}

function walk(folder) {
  if (!existsSync(path.join(root, folder))) return [];
  return readdirSync(path.join(root, folder), { withFileTypes: true })
    .flatMap((entry) => (entry.isDirectory() ? walk(path.join(folder, entry.name)) : [path.join(folder, entry.name)]))
    .sort();
}
