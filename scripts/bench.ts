import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { medianOf, secondsOf } from "./bench/clock";
import { csvOf, csvWays } from "./bench/csv";
import { bytesOf, compositions, waysOf } from "./bench/twoRatios";

/**
 * Measures the engine against named references in one run and prints ratios of medians: below 1 the engine is faster. Times
 * alone say more of the machine than of the engine, so none are printed. Run with `npm run bench`.
 */
const sizes = [1_000, 10_000, 100_000] as const;
const reference = path.resolve(import.meta.dirname, "bench/numpyReference.py");

/** Ratios aimed at by rows: machine code without and with logarithms, interpreter. */
const goals: Readonly<Record<string, Readonly<Record<number, number>>>> = {
  "machine plain": { 10_000: 1.0, 100_000: 0.35 },
  "machine log": { 10_000: 1.6, 100_000: 0.8 },
  "interpreter plain": { 10_000: 6, 100_000: 2.5 },
};

interface Line {
  readonly what: string;
  readonly rows: number;
  readonly ratio: number;
  readonly goal?: number;
}

interface Measured {
  readonly seconds: number;
  readonly sums: readonly number[];
}

function python(file: string, rows: number, kind: "plain" | "log" | "uncertainties"): Measured {
  const { status, stdout, stderr } = spawnSync("python3", [reference, file, String(rows), kind], { encoding: "utf8" });
  if (status !== 0) throw new Error(`the reference calculation in Python failed: ${stderr}`);
  return JSON.parse(stdout) as Measured;
}

function canImport(module: string): boolean {
  return spawnSync("python3", ["-c", `import ${module}`]).status === 0;
}

/** Both sides must have calculated the same thing, or their times say nothing. */
function requireSame(what: string, ours: readonly number[], theirs: readonly number[]): void {
  ours.forEach((sum, i) => {
    const other = theirs[i] ?? Number.NaN;
    // Sums of many rows are added in another order there.
    if (!(Math.abs(sum - other) <= 1e-10 * Math.abs(other))) throw new Error(`${what}: result ${i} sums to ${sum} here and to ${other} in numpy`);
  });
}

/** Alternates the two sides, so that whatever else the machine does meets both. */
function ratioOf(ours: () => number, theirs: () => number, rounds = 3): number {
  return medianOf(Array.from({ length: rounds }, () => ours() / theirs()));
}

function ratiosToNumpy(folder: string): Line[] {
  const lines: Line[] = [];
  const hasUncertainties = canImport("uncertainties");
  for (const rows of sizes) {
    const table = compositions(rows);
    const file = path.join(folder, `${rows}.f64`);
    writeFileSync(file, bytesOf(table));
    for (const kind of ["plain", "log"] as const) {
      const texts = kind === "plain" ? (["Mg / Si", "Al / Si"] as const) : (["log10(Mg / Si)", "log10(Al / Si)"] as const);
      const ways = waysOf(table, texts);
      requireSame(`${kind}, ${rows} rows`, ways.sums, python(file, rows, kind).sums);
      const numpy = (): number => python(file, rows, kind).seconds;
      for (const [way, work] of [
        ["machine", ways.machine],
        ["interpreter", ways.interpreter],
        ["whole page", ways.wholePage],
      ] as const) {
        const goal = goals[`${way} ${kind}`]?.[rows];
        const what = `value, σ, covariance of two ${kind === "log" ? "log10 of ratios" : "ratios"}: ${way} / numpy`;
        lines.push({ what, rows, ratio: ratioOf(() => secondsOf(work), numpy), ...(goal === undefined ? {} : { goal }) });
      }
      if (kind === "plain" && rows === 10_000 && hasUncertainties)
        lines.push({
          what: "value and σ of two ratios: machine / the uncertainties package",
          rows,
          ratio: secondsOf(ways.machine) / python(file, rows, "uncertainties").seconds,
          goal: 0.001,
        });
    }
  }
  if (!hasUncertainties)
    console.log("The uncertainties package is not compared: python3-uncertainties is missing; install it with apt-get install python3-uncertainties.");
  return lines;
}

function ratiosToPapaparse(): Line[] {
  return sizes.map((rows) => {
    const ways = csvWays(csvOf(rows));
    return {
      what: "CSV read with encoding, delimiter, headers / papaparse alone",
      rows,
      ratio: ratioOf(
        () => secondsOf(ways.ours),
        () => secondsOf(ways.papaparse),
      ),
    };
  });
}

function print(lines: readonly Line[]): void {
  const width = Math.max(...lines.map(({ what }) => what.length));
  for (const { what, rows, ratio, goal } of lines) {
    const aimed = goal === undefined ? "" : `  goal ${goal}${ratio <= goal ? ", met" : ", missed"}`;
    console.log(`${what.padEnd(width)}  ${String(rows).padStart(7)} rows  ${ratio.toPrecision(3).padStart(8)}${aimed}`);
  }
}

const folder = mkdtempSync(path.join(tmpdir(), "cotectic-bench-"));
try {
  if (canImport("numpy")) print(ratiosToNumpy(folder));
  else console.log("The engine is not compared with numpy: python3-numpy is missing; install it with apt-get install python3-numpy.");
  print(ratiosToPapaparse());
} finally {
  rmSync(folder, { recursive: true, force: true });
}
