import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, rmSync } from "node:fs";
import path from "node:path";
import { childEnv, fail, home, log } from "./shared.mjs";

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

/** Where packages are unpacked for people who are not root. */
export const unpackedRoot = () => path.join(home(), "debian");

/**
 * Unpacks a package and the libraries it wants beside the data, without installing anything. Libraries that the machine has
 * are left out.
 *
 * @param sentence what to say when it fails
 */
export function unpackDebian(name, sentence) {
  log(`unpacking Debian's ${name} beside the data, since we are not root`);
  const folder = path.join(home(), "debs");
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder, { recursive: true });
  const packages = [name, ...missingDependencies(name)];
  const fetched = spawnSync("apt-get", ["download", "-qq", ...packages], { cwd: folder, stdio: "ignore", env: childEnv() });
  if (fetched.status !== 0) fail(sentence);
  for (const deb of readdirSync(folder).filter((file) => file.endsWith(".deb"))) {
    if (spawnSync("dpkg", ["-x", path.join(folder, deb), unpackedRoot()]).status !== 0) fail(sentence);
  }
  rmSync(folder, { recursive: true, force: true });
}

/** Everything `name` depends on that is not installed and is a library, a font or a part of the package itself. */
function missingDependencies(name) {
  const options = ["--recurse", "--no-recommends", "--no-suggests", "--no-conflicts", "--no-breaks", "--no-replaces", "--no-enhances"];
  const listed = spawnSync("apt-cache", ["depends", ...options, name], { encoding: "utf8", maxBuffer: 1 << 26 });
  const wanted = (listed.stdout ?? "")
    .split("\n")
    .filter((line) => /^[a-z0-9]\S*$/.test(line) && (/^lib|fonts-|-common$|^fontconfig-config$/.test(line) || line.startsWith(`${name}-`)));
  return [...new Set(wanted)].filter((candidate) => candidate !== name && spawnSync("dpkg", ["-s", candidate], { stdio: "ignore" }).status !== 0);
}

/** Folders of the unpacked libraries, for LD_LIBRARY_PATH; `""` when nothing is unpacked. Some keep theirs a folder deeper. */
export function unpackedLibraries() {
  const roots = ["usr/lib", "lib"].map((part) => path.join(unpackedRoot(), part)).filter((folder) => existsSync(folder));
  const ours = roots.flatMap((folder) => folders(folder)).filter((folder) => folder.endsWith("-linux-gnu"));
  const deeper = ours.flatMap((folder) => folders(folder)).filter((folder) => readdirSync(folder).some((file) => /\.so(\.|$)/.test(file)));
  return [...ours, ...deeper].join(":");
}

function folders(inside) {
  return readdirSync(inside, { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => path.join(inside, entry.name));
}
