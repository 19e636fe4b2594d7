import { spawnSync } from "node:child_process";

/** Python modules by the Debian package that holds each. */
export type Modules = Readonly<Record<string, string>>;

export class NoPythonError extends Error {}

/**
 * A Python 3 that has all modules: `PYTHON` where that is set, the one on the path, Debian's own. Missing ones are installed
 * from Debian where that is possible.
 *
 * @throws NoPythonError with a sentence that says what is missing and what to do
 */
export function pythonWith(modules: Modules): string {
  const found = searched(modules);
  if (found !== undefined) return found;
  const packages = ["python3", ...Object.values(modules)];
  const why = install(packages);
  const installed = why === undefined ? searched(modules) : undefined;
  if (installed !== undefined) return installed;
  throw new NoPythonError(
    `The reference calculations need Python 3 with ${Object.keys(modules).join(", ")}, which is not on this machine${why === undefined ? "" : ` and could not be installed (${why})`}. Run "apt-get install ${packages.join(" ")}" as root, or name a Python that has them in the variable PYTHON.`,
  );
}

function searched(modules: Modules): string | undefined {
  const own = process.env["PYTHON"];
  const candidates = own === undefined || own === "" ? ["python3", "/usr/bin/python3"] : [own];
  const program = Object.keys(modules)
    .map((name) => `import ${name}`)
    .join("\n");
  return candidates.find((python) => spawnSync(python, ["-c", program], { stdio: "ignore" }).status === 0);
}

/** Installs packages of Debian's; what stood in the way, or undefined where nothing did. */
function install(packages: readonly string[]): string | undefined {
  if (process.getuid?.() !== 0) return "that takes root";
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  for (const call of [
    ["update", "-qq"],
    ["install", "-y", "-qq", "--no-install-recommends", ...packages],
  ]) {
    const { status, error, stderr } = spawnSync("apt-get", call, { env, encoding: "utf8", stdio: ["ignore", "ignore", "pipe"] });
    if (error !== undefined) return error.message;
    if (status !== 0) return (stderr.trim().split("\n").at(-1) ?? "").slice(0, 200) || `apt-get ${call[0]} ended with ${status}`;
  }
  return undefined;
}
