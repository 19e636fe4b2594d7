import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { compare, sideOf, type Compared } from "./clock";
import { threeDigits, type Line } from "./line";
import type { Python, Task } from "./python";
import { bytesOf, compositions, lastOf, ways, waysOf, type Ways } from "./twoRatios";

const sizes = [1_000, 10_000, 100_000, 1_000_000] as const;
const kinds = ["plain", "log"] as const;
/** Ratios aimed at, at 10⁴, 10⁵ and 10⁶ rows. */
const goals: Readonly<Record<string, readonly [number, number, number]>> = {
  "machine plain": [1.0, 0.35, 0.5],
  "machine log": [1.6, 0.8, 1.2],
  "interpreter plain": [6, 2.5, 3.5],
};

/** Value, σ and covariance of two ratios, and of their logarithms: each way of ours beside numpy, and how both grow with the rows. */
export async function againstNumpy(python: Python, folder: string, say: (line: Line) => void): Promise<string[]> {
  const growth: string[] = [];
  const before = new Map<string, Compared>();
  for (const [place, rows] of sizes.entries()) {
    const table = compositions(rows);
    const file = path.join(folder, `${rows}.f64`);
    writeFileSync(file, bytesOf(table));
    for (const kind of kinds) {
      const texts = kind === "plain" ? (["Mg / Si", "Al / Si"] as const) : (["log10(Mg / Si)", "log10(Al / Si)"] as const);
      const made = waysOf(table, texts);
      await requireSame(made, python, kind, file, rows, folder);
      for (const way of ways) {
        const found = await compare(
          sideOf(() => lastOf(made[way]())),
          (calls) => python.seconds(kind, file, rows, calls),
        );
        const goal = place === 0 ? undefined : goals[`${way} ${kind}`]?.[place - 1];
        const of = kind === "log" ? "two log10 of ratios" : "two ratios";
        const what = `value, σ, covariance of ${of}: ${way} / numpy`;
        say({ what, rows, is: "ratio", figure: found.ratio, ...(goal === undefined ? {} : { goal }) });
        const smaller = before.get(`${way} ${kind}`);
        if (smaller !== undefined)
          growth.push(
            `from ${(rows / 10).toLocaleString("en")} to ${rows.toLocaleString("en")} rows, ${of}: ${way} takes ${threeDigits(found.ours / smaller.ours)} × the time, numpy ${threeDigits(found.theirs / smaller.theirs)} ×`,
          );
        before.set(`${way} ${kind}`, found);
      }
      if (kind === "plain" && rows === 10_000) say(await againstUncertainties(made, python, file, rows, folder));
    }
  }
  return growth;
}

async function againstUncertainties(made: Ways, python: Python, file: string, rows: number, folder: string): Promise<Line> {
  await requireSame(made, python, "uncertainties", file, rows, folder);
  const { ratio } = await compare(
    sideOf(() => lastOf(made.machine())),
    (calls) => python.seconds("uncertainties", file, rows, calls),
  );
  // Ours has the covariance too.
  return { what: "value and σ of two ratios: machine, to the arrays of the uncertainties package", rows, is: "times faster", figure: 1 / ratio, goal: 1000 };
}

/** Both sides must have calculated the same thing, row by row, or their times say nothing. */
async function requireSame(made: Ways, python: Python, task: Task, file: string, rows: number, folder: string): Promise<void> {
  const to = path.join(folder, "results.f64");
  await python.results(task, file, rows, to);
  const { buffer, byteOffset, byteLength } = readFileSync(to);
  const theirs = new Float64Array(buffer.slice(byteOffset, byteOffset + byteLength));
  for (const way of ways) {
    const ours = made[way]();
    for (let k = 0; k * rows < theirs.length; k++) {
      for (let row = 0; row < rows; row++) {
        const [own, other] = [ours[k]?.[row] ?? Number.NaN, theirs[k * rows + row] ?? Number.NaN];
        // A logarithm near 0 has lost digits before it is taken.
        if (!(Math.abs(own - other) <= 1e-12 * Math.abs(other) + 1e-15))
          throw new Error(`${task}, ${way}: result ${k} of row ${row} is ${own} here and ${other} there`);
      }
    }
  }
}
