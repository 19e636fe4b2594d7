import { expect, it } from "vitest";
import { lineOf, resultOf } from "../cells/page/pages";
import { evaluateTable, Nearness, numberColumns, recorded } from "./recorded";

interface Case {
  readonly id: string;
  readonly given: {
    readonly names: readonly string[];
    readonly rows: readonly { readonly value: readonly number[]; readonly sigma: readonly number[] }[];
    readonly correlations: readonly { readonly of: readonly [string, string]; readonly value: number }[];
  };
  readonly formulas: readonly {
    readonly text: string;
    readonly value: readonly number[];
    readonly sigma: readonly number[];
    readonly correlation: readonly number[];
  }[];
}

/**
 * Values to 1e-12 of their size. σ and correlations to 1e-9: the package turns correlated inputs into independent ones by
 * eigenvectors and loses some digits there where terms cancel.
 */
it("200 random formulas of correlated inputs have the value, σ and correlation of the package `uncertainties` (scripts/reference/formulas.py)", () => {
  const near = new Nearness();
  let count = 0;
  for (const { id, given, formulas } of recorded<Case>("formulas")) {
    const columns: Record<string, number[]> = {};
    given.names.forEach((name, i) => {
      columns[name] = given.rows.map((row) => row.value[i] ?? Number.NaN);
      columns[`s ${name}`] = given.rows.map((row) => row.sigma[i] ?? Number.NaN);
    });
    const plots = formulas.flatMap((_, k) =>
      k % 2 === 0 ? [{ id: `p${k}`, kind: "plot", plot: "scatter", drawn: [{ data: "d", x: `f${k}`, y: `f${k + 1}` }] }] : [],
    );
    const results = evaluateTable(columns, [
      {
        id: "d",
        kind: "data",
        source: { file: "given.csv" },
        columns: numberColumns(Object.fromEntries(given.names.map((name) => [name, `s ${name}`]))),
        correlations: given.correlations,
      },
      { id: "r", kind: "formula", data: "d", text: formulas.map(({ text }, k) => `f${k} = ${text}`).join("\n") },
      ...plots,
    ]);
    formulas.forEach(({ text, value, sigma, correlation }, k) => {
      const line = lineOf(results, `f${k}`);
      const [samples] = resultOf(results, `p${k - (k % 2)}`, "plot").layers;
      value.forEach((known, row) => {
        const at = `${id}, row ${row + 1}, ${text}`;
        near.relative("value", at, line.value[row], known, 1e-12);
        near.relative("σ", at, line.sigma[row], sigma[row] ?? Number.NaN, 1e-9);
        if (k % 2 === 0)
          near.add("correlation", at, samples?.what === "samples" ? samples.points.correlation[row] : undefined, correlation[row] ?? Number.NaN, 1e-9);
      });
      count++;
    });
  }
  expect(count).toBe(200);
  near.hold();
});
