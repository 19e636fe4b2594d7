import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { createRandom } from "@/cells/numeric";
import type { FitPoints } from "@/cells/trend/lineFit";
import { york } from "@/cells/trend/york";
import { compare, sideOf } from "./clock";
import type { Line } from "./line";
import type { Python } from "./python";

/** One fit of scipy.odr may take this long, seconds; beyond it fewer points are taken. */
const PATIENCE = 30;

/** Points along a line with errors of 1 to 3 % on both axes; with correlations of 0.2 to 0.9 between them, or none. Invented. */
function pointsOf(n: number, correlated: boolean): FitPoints {
  const random = createRandom(20_261_202);
  const points = { x: new Float64Array(n), y: new Float64Array(n), sigmaX: new Float64Array(n), sigmaY: new Float64Array(n), correlation: new Float64Array(n) };
  for (let i = 0; i < n; i++) {
    const x = 0.5 + random.uniform();
    const y = 0.02 + 0.1 * x;
    const [p, q] = [x * (0.01 + 0.02 * random.uniform()), y * (0.01 + 0.02 * random.uniform())];
    const rho = correlated ? 0.2 + 0.7 * random.uniform() : 0;
    const [e, f] = [random.normal(), random.normal()];
    points.x[i] = x + p * e;
    points.y[i] = y + q * (rho * e + Math.sqrt(1 - rho * rho) * f);
    points.sigmaX[i] = p;
    points.sigmaY[i] = q;
    points.correlation[i] = rho;
  }
  return points;
}

/** York's line beside scipy.odr: without correlation by its explicit form, with correlation by the implicit one. */
export async function againstOdr(python: Python, folder: string, say: (line: Line) => void, tell: (text: string) => void): Promise<void> {
  for (const correlated of [false, true]) {
    let last: { readonly n: number; readonly seconds: number } | undefined;
    for (const wished of [10_000, 100_000]) {
      let n = wished;
      // It grows at least as fast as its points.
      while (last !== undefined && (last.seconds * n) / last.n > PATIENCE) n /= 2;
      if (n < wished) tell(`scipy.odr would take too long for ${wished.toLocaleString("en")} correlated points; ${n.toLocaleString("en")} are taken.`);
      const points = pointsOf(n, correlated);
      const file = path.join(folder, `york-${n}-${correlated ? "correlated" : "free"}.f64`);
      const { x, y, sigmaX, sigmaY, correlation } = points;
      writeFileSync(file, Buffer.concat([x, y, sigmaX, sigmaY, correlation].map((column) => Buffer.from(column.buffer))));
      const task = correlated ? "odr correlated" : "odr";
      await requireSame(points, python, task, file, folder);
      const { ratio, theirs } = await compare(
        sideOf(() => york(points).slope),
        (calls) => python.seconds(task, file, n, calls),
      );
      last = { n, seconds: theirs };
      const form = correlated ? "with x–y correlation, to scipy.odr's implicit form" : "to scipy.odr";
      say({ what: `York's line ${form}`, rows: n, is: "times faster", figure: 1 / ratio, goal: correlated ? 300 : 12 });
    }
  }
}

/**
 * Both fits must have come to the same line: slope and intercept to 10⁻⁵ of themselves (scipy.odr stops when S changes by less
 * than 10⁻⁸), S to 10⁻³ (its implicit form reaches the line only up to a finite penalty).
 */
async function requireSame(points: FitPoints, python: Python, task: "odr" | "odr correlated", file: string, folder: string): Promise<void> {
  const to = path.join(folder, "fit.f64");
  await python.results(task, file, points.x.length, to);
  const bytes = readFileSync(to);
  const { slope, intercept, S } = york(points);
  const checks = [
    ["slope", slope, 1e-5],
    ["intercept", intercept, 1e-5],
    ["S", S, 1e-3],
  ] as const;
  checks.forEach(([name, own, tolerance], i) => {
    const other = bytes.readDoubleLE(8 * i);
    if (!(Math.abs(own - other) <= tolerance * Math.abs(other))) throw new Error(`${task}: ${name} of the line is ${own} here and ${other} there`);
  });
}
