/**
 * Makes the recorded reference values again and compares: `npm run check:reference`. With `--write` the recordings are
 * replaced by what was made.
 *
 * Every scripts/reference/NAME.py prints what stands in tests/reference/recorded/NAME.json, with the difference that another
 * machine or version may make. Exit 0: all within; 1: something differs; 2: Python or a package of its is missing.
 */
import { spawnSync } from "node:child_process";
import { readdirSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { compare, type Comparison, type Tolerance } from "./reference/compare";
import { NoPythonError, pythonWith } from "./reference/python";

interface Recording {
  readonly with: Readonly<Record<string, string>>;
  readonly remade: Tolerance;
  readonly cases: unknown;
}

const scripts = path.resolve(import.meta.dirname, "reference");
const recordings = path.resolve(import.meta.dirname, "../tests/reference/recorded");
const modules = { numpy: "python3-numpy", scipy: "python3-scipy", mpmath: "python3-mpmath", uncertainties: "python3-uncertainties" };

function make(python: string, name: string): string {
  const { status, stdout, stderr, error } = spawnSync(python, ["-B", `${name}.py`], { cwd: scripts, encoding: "utf8", maxBuffer: 1 << 28 });
  if (status !== 0) throw new Error(`scripts/reference/${name}.py failed: ${error?.message ?? stderr.trim().split("\n").at(-1)}`);
  return stdout;
}

function check(python: string, name: string): Comparison {
  const recorded = JSON.parse(readFileSync(path.join(recordings, `${name}.json`), "utf8")) as Recording;
  const made = JSON.parse(make(python, name)) as Recording;
  const found = compare(recorded.cases, made.cases, recorded.remade);
  const versions = Object.entries(made.with).map(([what, version]) => `${what} ${version}`);
  console.log(`${name}: ${found.numbers} numbers with ${versions.join(", ")}; largest difference ${found.worst.toPrecision(2)} of what it may be`);
  for (const difference of found.differences) console.log(`  ${difference}`);
  return found;
}

function run(write: boolean): number {
  const names = readdirSync(scripts)
    .filter((file) => file.endsWith(".py") && file !== "recording.py")
    .map((file) => path.basename(file, ".py"))
    .sort();
  const python = pythonWith(modules);
  if (write) {
    for (const name of names) writeFileSync(path.join(recordings, `${name}.json`), make(python, name));
    console.log(`Recorded ${names.length} files under tests/reference/recorded.`);
    return 0;
  }
  const found = names.map((name) => check(python, name));
  const numbers = found.reduce((sum, each) => sum + each.numbers, 0);
  const faulty = names.filter((_, i) => !((found[i]?.worst ?? Infinity) <= 1));
  if (faulty.length === 0) console.log(`All ${numbers} reference values of ${names.length} recordings were made again within their tolerances.`);
  else console.log(`Reference values differ from what is recorded in ${faulty.join(", ")}: find out which is right before anything is recorded anew.`);
  return faulty.length === 0 ? 0 : 1;
}

try {
  process.exitCode = run(process.argv.includes("--write"));
} catch (error) {
  if (!(error instanceof Error)) throw error;
  console.log(error.message);
  process.exitCode = error instanceof NoPythonError ? 2 : 1;
}
