/**
 * Everything that must hold, in one run: format, types, lint, unit, integration and browser tests. Ends with one line,
 * `N passed, N failed`.
 */
import { spawn } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, rmSync } from "node:fs";
import { childEnv, log, root } from "./boot/shared.mjs";
import { readBootFile } from "./boot/state.mjs";
import { stopCluster } from "./boot/cluster.mjs";

const only = process.argv.slice(2);
let passed = 0;
let failed = 0;
mkdirSync(`${root}/.data`, { recursive: true });

await Promise.all([
  check("format", ["node_modules/prettier/bin/prettier.cjs", "--check", "--log-level", "warn", "."]),
  check("types", ["node_modules/typescript/bin/tsc", "--noEmit"]),
]);
await Promise.all([check("lint", ["node_modules/eslint/bin/eslint.js", ".", "--max-warnings", "0"]), suite("unit")]);
await suite("integration");
await suite("browser");
if (readBootFile("test").CLUSTER_STARTED === "true") await stopCluster("test");
console.log(`${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);

/** A check that passes or fails as one. */
async function check(name, args) {
  if (only.length > 0 && !only.includes(name)) return;
  const started = Date.now();
  const { code, output } = await node(args);
  if (code === 0) passed++;
  else failed++;
  log(`${name}: ${code === 0 ? "passed" : "FAILED"} in ${seconds(started)}`);
  if (code !== 0) console.log(output);
}

/** One project of vitest, counted test by test. */
async function suite(name) {
  if (only.length > 0 && !only.includes(name)) return;
  const started = Date.now();
  const report = `${root}/.data/vitest-${name}.json`;
  rmSync(report, { force: true });
  const { code, output } = await node([
    "node_modules/vitest/vitest.mjs",
    "run",
    "--project",
    name,
    "--reporter=dot",
    "--reporter=json",
    `--outputFile.json=${report}`,
  ]);
  const result = existsSync(report) ? JSON.parse(readFileSync(report, "utf8")) : { numPassedTests: 0, numFailedTests: 0 };
  // A file that does not load, or a runner that dies, counts as a failure even where no single test does.
  const broken = code !== 0 && result.numFailedTests === 0 ? 1 : 0;
  const empty = result.numPassedTests + result.numFailedTests === 0 ? 1 : 0;
  passed += result.numPassedTests;
  failed += result.numFailedTests + Math.max(broken, empty);
  log(`${name}: ${result.numPassedTests} passed, ${result.numFailedTests + Math.max(broken, empty)} failed in ${seconds(started)}`);
  if (code !== 0) console.log(output.split("\n").slice(-400).join("\n"));
}

function seconds(since) {
  return `${((Date.now() - since) / 1000).toFixed(0)} s`;
}

function node(args) {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, args, { cwd: root, env: { ...childEnv(), FORCE_COLOR: "0" }, stdio: ["ignore", "pipe", "pipe"] });
    const chunks = [];
    child.stdout.on("data", (chunk) => chunks.push(chunk));
    child.stderr.on("data", (chunk) => chunks.push(chunk));
    child.on("close", (code) => resolve({ code: code ?? 1, output: Buffer.concat(chunks).toString() }));
  });
}
