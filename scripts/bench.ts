import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { againstNumpy } from "./bench/againstNumpy";
import { againstOdr } from "./bench/againstOdr";
import { compare, sideOf } from "./bench/clock";
import { csvOf, csvWays } from "./bench/csv";
import { textOf, type Line } from "./bench/line";
import { findPython, Python } from "./bench/python";

/**
 * Measures the engine against named references in one run: medians of five rounds in which both sides take turns, after their
 * results have been found equal. Times alone say more of the machine than of the engine, so only ratios are printed. Run with
 * `npm run bench`.
 */
async function bench(folder: string): Promise<void> {
  const say = (line: Line): void => {
    console.log(textOf(line, 94));
  };
  const found = findPython();
  if ("missing" in found) {
    console.log(found.missing);
    process.exitCode = 1;
  } else {
    const python = new Python(found.command);
    try {
      const growth = await againstNumpy(python, folder, say);
      await againstOdr(python, folder, say, console.log);
      for (const text of growth) console.log(text);
    } finally {
      python.close();
    }
  }
  for (const rows of [1_000, 10_000, 100_000]) {
    const ways = csvWays(csvOf(rows));
    const { ratio } = await compare(sideOf(ways.ours), sideOf(ways.papaparse));
    say({ what: "CSV read with encoding, delimiter, headers / papaparse alone", rows, is: "ratio", figure: ratio });
  }
}

const folder = mkdtempSync(path.join(tmpdir(), "cotectic-bench-"));
try {
  await bench(folder);
} finally {
  rmSync(folder, { recursive: true, force: true });
}
