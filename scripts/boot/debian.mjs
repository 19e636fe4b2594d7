import { spawnSync } from "node:child_process";
import { childEnv, fail, log } from "./shared.mjs";

let updated = false;

/** Installs packages of Debian's, as root; a failure ends the process with `sentence`. */
export function aptInstall(packages, sentence) {
  const env = { ...childEnv(), DEBIAN_FRONTEND: "noninteractive" };
  if (!updated) {
    log("reading Debian's package lists");
    apt(["update", "-qq"], env, sentence);
    updated = true;
  }
  log(`installing ${packages.join(", ")} from Debian`);
  apt(["install", "-y", "-qq", "--no-install-recommends", ...packages], env, sentence);
}

function apt(args, env, sentence) {
  const result = spawnSync("apt-get", args, { env, encoding: "utf8", stdio: ["ignore", "pipe", "pipe"] });
  if (result.error || result.status !== 0) {
    const why = result.error?.message ?? (result.stderr || "").trim().split("\n").at(-1) ?? "";
    fail(`${sentence} (apt-get ${args[0]}: ${why}).`);
  }
}
