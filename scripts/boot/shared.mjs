import { spawnSync } from "node:child_process";
import { mkdirSync } from "node:fs";
import path from "node:path";
import { fileURLToPath } from "node:url";

/** The project's folder. */
export const root = path.dirname(path.dirname(path.dirname(fileURLToPath(import.meta.url))));
export const isRoot = process.getuid?.() === 0;

export function log(...words) {
  console.log("cotectic:", ...words);
}

/** Ends the process with one clear sentence. */
export function fail(sentence) {
  console.error(`cotectic: ${sentence}`);
  process.exit(1);
}

/**
 * Where the private cluster, its state and the locks live. PostgreSQL refuses to run as root, and its user cannot enter a
 * checkout under /root, so root's lives under /var/lib.
 */
export function home() {
  const folder = process.env.COTECTIC_HOME ?? (isRoot ? "/var/lib/cotectic" : path.join(root, ".data"));
  mkdirSync(folder, { recursive: true, mode: 0o755 });
  return folder;
}

/**
 * The environment without what the outer npm and a production shell would force on a nested one: with NODE_ENV=production a
 * nested `npm ci` leaves out what the build needs.
 */
export function childEnv() {
  return Object.fromEntries(
    Object.entries(process.env).filter(
      ([name]) => name !== "NODE_ENV" && !/^npm_(config_(omit|include|production|only|ignore_scripts)|lifecycle|package|command)/.test(name),
    ),
  );
}

/** Runs a command to its end; a failure ends the process with `sentence`. */
export function run(command, args, options, sentence) {
  const result = spawnSync(command, args, { stdio: ["ignore", "inherit", "inherit"], env: childEnv(), cwd: root, ...options });
  if (result.error || result.status !== 0)
    fail(`${sentence} (${command} ${args.join(" ")}: ${result.error?.message ?? `exit ${result.status ?? result.signal}`}).`);
  return result;
}
