import { describe, expect, it } from "vitest";
import { createEngine, type DataResult, type Engine, type FormulaResult, type PageResults, type TraceNode } from "@/cells";
import { nodesOf, pageOf } from "../page/pages";
import { errorsOf, problemOf, problemsOf, quantity, sigmasOf, statesOf, tableOf, valuesOf } from "./blocks";

/** Invented rocks: A is wet, B nearly dry, C lacks CaO and so has no total, D is set aside. A's K2O is below detection. */
const csv = `Sample,SiO2,2s SiO2,Al2O3,MgO,2s MgO,CaO,FeOt,K2O,H2O,LOI,S,Zr,T,Mg/Si,glass
A,42.0,0.4,4.0,35.0,0.3,3.0,8.0,<0.2,6.5,7.2,0.3,12,1200,0.9,30
B,45.0,0.4,4.2,38.0,0.3,3.1,8.1,0.4,0.3,0.4,0.02,11,1210,0.91,31
C,44.0,0.4,4.1,37.0,0.3,,8.0,0.3,2.0,2.2,0.1,13,1190,0.92,32
D,43.0,0.4,4.0,36.0,0.3,3.0,8.0,0.3,4.0,4.1,0.1,14,1190,0.93,33
`;
const wt = (species: string): object => ({ header: species, name: species, role: "quantity", species, unit: "wt%" });
const twoSigma = (of: string): object => ({ header: `2s ${of}`, role: "uncertainty", of, as: "2 sigma" });
const columns = [
  { header: "Sample", role: "sample" },
  ...["SiO2", "Al2O3", "MgO", "CaO", "FeOt", "K2O", "H2O", "S"].map(wt),
  ...["SiO2", "MgO"].map(twoSigma),
  { header: "LOI", name: "LOI", role: "quantity", unit: "wt%" },
  { header: "Zr", name: "Zr", role: "quantity", species: "Zr", unit: "µg/g" },
  { header: "T", name: "T", role: "quantity", unit: "°C" },
  { header: "Mg/Si", name: "ratio", role: "quantity", unit: "1", basis: "mass" },
  { header: "glass", name: "glass", role: "quantity", unit: "wt%" },
];
const source = {
  id: "ch",
  kind: "data",
  source: { file: "ch.csv" },
  columns,
  setAside: [{ row: 4, sample: "D", reason: "altered" }],
  correlations: [{ of: ["MgO", "SiO2"], value: 0.4 }],
};
const asked = { ...source, renormalise: "volatile-free" };

/** By hand: oxides, iron and zirconium of each row; water, sulphur and loss on ignition are out, K2O of A is no number. */
const sums = { A: 42 + 4 + 35 + 3 + 8 + 0.0012, B: 45 + 4.2 + 38 + 3.1 + 8.1 + 0.4 + 0.0011 };

interface Run {
  readonly engine: Engine;
  readonly results: PageResults;
}

function run(blocks: readonly object[]): Run {
  const engine = createEngine();
  for (const id of ["ch", "dry"]) engine.setSource(`${id}.csv`, new TextEncoder().encode(csv));
  return { engine, results: engine.evaluate(pageOf(blocks)) };
}

function dataOf({ results }: Run, id = "ch"): DataResult {
  const result = results.blocks.get(id);
  if (result?.kind !== "data") throw new Error(`${id} is no data block`);
  return result;
}

function formulaOf({ results }: Run, id = "r"): FormulaResult {
  const result = results.blocks.get(id);
  if (result?.kind !== "formula") throw new Error(`${id} is no formula block`);
  return result;
}

const read = (block: object): DataResult => dataOf(run([block]));

describe("renormalising volatile-free", () => {
  it("is done only where it is asked for", () => {
    const result = read(source);
    expect(valuesOf(result, "SiO2").slice(0, 2)).toEqual([42, 45]);
    expect(problemsOf(result, "renormalised")).toEqual([]);
    expect(tableOf(result).renormalised).toBeUndefined();
  });

  it("multiplies oxides, iron and trace elements of a row by 100 over their sum, with σ and limits", () => {
    const result = read(asked);
    const before = read(source);
    for (const name of ["SiO2", "Al2O3", "MgO", "CaO", "FeOt", "Zr"])
      (["A", "B"] as const).forEach((sample, row) => {
        const factor = 100 / sums[sample];
        expect(valuesOf(result, name)[row]).toBeCloseTo((valuesOf(before, name)[row] ?? Number.NaN) * factor, 10);
        const sigma = sigmasOf(before, name)[row];
        if (sigma == null) expect(sigmasOf(result, name)[row]).toBeNull();
        else expect(sigmasOf(result, name)[row]).toBeCloseTo(sigma * factor, 12);
      });
    expect(sigmasOf(result, "MgO")[0]).toBeCloseTo((0.15 * 100) / sums.A, 12);
    const limit = quantity(result, "K2O").limit[0];
    expect(limit).toBeCloseTo((0.002 * 100) / sums.A, 12);
    expect(statesOf(result, "K2O")[0]).toBe("below detection");
    // With what was no number counted as nothing, what is left sums to 100 wt%.
    const sum = ["SiO2", "Al2O3", "MgO", "CaO", "FeOt"].reduce((all, name) => all + (valuesOf(result, name)[0] ?? Number.NaN), 0);
    expect(sum + (valuesOf(result, "Zr")[0] ?? Number.NaN) / 1e4).toBeCloseTo(100, 10);
  });

  it("leaves volatiles, loss on ignition, ratios, temperatures and what has no species as measured, and the source's text everywhere", () => {
    const [result, before] = [read(asked), read(source)];
    for (const name of ["H2O", "S", "LOI", "T", "ratio", "glass"]) expect(valuesOf(result, name)).toEqual(valuesOf(before, name));
    for (const name of ["SiO2", "K2O", "Zr"]) expect(quantity(result, name).raw).toEqual(quantity(before, name).raw);
    expect(problemOf(result, "renormalised").text).toContain("H2O, S, LOI and glass stay as measured");
  });

  it("leaves rows without a total as they are, names and counts them", () => {
    const [result, before] = [read(asked), read(source)];
    for (const name of ["SiO2", "MgO", "Zr"]) expect(valuesOf(result, name)[2]).toBe(valuesOf(before, name)[2]);
    const { severity, text } = problemOf(result, "renormalise-left");
    expect(severity).toBe("warning");
    expect(text).toMatch(/^1 sample without a total .* as measured beside the others: C\./u);
    // By hand: 100 / 98.8011 and 100 / 92.0012; D is set aside and counts for nothing.
    expect(problemOf(result, "renormalised").text).toContain(
      "in 2 samples oxides and elements by mass are divided by their sum without volatiles, which multiplies them by 1.012 to 1.087",
    );
    expect(errorsOf(result)).toEqual([]);
  });

  it("keeps the total that was measured, and what screening says of it", () => {
    const [result, before] = [read(asked), read(source)];
    expect(result.totals).toEqual(before.totals);
    expect(result.totals?.[0]).toBeCloseTo(sums.A + 7.2, 10);
    expect(result.screening).toEqual(before.screening);
  });

  it("says so where a table has no totals, and changes nothing", () => {
    const few = { ...asked, columns: columns.filter((column) => !("name" in column && column.name === "CaO")) };
    const result = read(few);
    expect(problemOf(result, "renormalise-nothing").severity).toBe("warning");
    expect(valuesOf(result, "SiO2")[0]).toBe(42);
    expect(problemsOf(result, "renormalised")).toEqual([]);
  });

  it("changes no ratio: value, σ and correlation are the same to 1e-12", () => {
    const text = "a = Mg / Si\nb = atoms(Al) / atoms(Si)\nc = Zr / K2O\nd = MgO / (MgO + FeOt)\ne = log10(Mg / Fe)\nf = norm(Ca / Al, CI)";
    const formula = { id: "r", kind: "formula", data: "ch", text };
    const [after, before] = [formulaOf(run([asked, formula])), formulaOf(run([source, formula]))];
    expect(after.lines).toHaveLength(6);
    for (const [i, line] of after.lines.entries()) {
      const old = before.lines[i];
      if (old === undefined) throw new Error("no such line");
      expect(line.ok).toBe(true);
      expect(line.state).toEqual(old.state);
      for (const which of ["value", "sigma"] as const)
        line[which].forEach((value, row) => {
          const was = old[which][row] ?? Number.NaN;
          if (Number.isNaN(was)) expect(value).toBeNaN();
          else expect(Math.abs(value - was)).toBeLessThanOrEqual(1e-12 * Math.abs(was));
        });
    }
    const mgSi = after.lines[0];
    // 24.305/40.304 over 28.085/60.083 (CIAAW 2021, as in the reference table), and its relative σ with a correlation of 0.4.
    expect(mgSi?.value[0]).toBeCloseTo((35 * 24.305 * 60.083) / (40.304 * 28.085 * 42), 4);
    const [x, y] = [0.15 / 35, 0.2 / 42];
    expect((mgSi?.sigma[0] ?? 0) / (mgSi?.value[0] ?? 1)).toBeCloseTo(Math.sqrt(x * x + y * y - 2 * 0.4 * x * y), 10);
  });

  it("is said once by every formula, trend, plot and budget that uses the table, and a volatile by its name", () => {
    const page = run([
      asked,
      { id: "r", kind: "formula", data: "ch", text: "mg = MgO\nsi = SiO2\nwet = H2O / K2O" },
      { id: "t", kind: "trend", data: "ch", x: "SiO2", y: "MgO", method: "ordinary least squares" },
      { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "SiO2", y: "MgO" }] },
      {
        id: "b",
        kind: "budget",
        start: { data: "ch", row: 1 },
        steps: [{ do: "add", what: { data: "ch", row: 2 }, amount: { value: 0.1, sigma: 0 } }],
        report: ["Mg / Si"],
      },
    ]);
    const said = "Values of ch are renormalised volatile-free, 1 sample without a total left as measured; their σ do not count the error of the sum.";
    for (const id of ["r", "t", "p", "b"]) {
      const texts = (page.results.blocks.get(id)?.problems ?? []).filter(({ text }) => text === said);
      expect(texts.map(({ severity }) => severity)).toEqual(["warning"]);
    }
    expect(
      formulaOf(page)
        .problems.filter(({ code }) => code === "as-measured")
        .map(({ text }) => text),
    ).toEqual([
      "H2O of ch stays as measured, per mass of the rock with its volatiles: a ratio of it to a renormalised value mixes the two. Take both from a table that is not renormalised.",
    ]);
  });

  it("is a step of the trace, from the scaled value to the cell of the source", () => {
    const { engine } = run([asked, { id: "r", kind: "formula", data: "ch", text: "mg = MgO" }]);
    const cell = engine.trace({ block: "ch", name: "MgO", index: 0 });
    const line = engine.trace({ block: "r", name: "mg", index: 0 });
    for (const node of [cell, line]) {
      const nodes = node === null ? [] : nodesOf(node);
      const step = nodes.find(({ label }) => label === `MgO × ${Number((100 / sums.A).toPrecision(6))}`);
      expect(step?.value).toBeCloseTo((35 * 100) / sums.A, 10);
      expect(step?.notes[0]).toContain("sum to 92.0012 wt% without volatiles");
      const [measured] = step?.from ?? [];
      expect(measured?.cell).toMatchObject({ block: "ch", row: 1, column: "MgO", raw: "35.0" });
      expect([measured?.value, measured?.sigma]).toEqual([expect.closeTo(35, 12), expect.closeTo(0.15, 12)]);
    }
    // A row that is left as it was has no such step.
    const left: TraceNode | null = engine.trace({ block: "ch", name: "MgO", index: 2 });
    expect((left === null ? [] : nodesOf(left)).some(({ label }) => label.includes("×"))).toBe(false);
  });

  it("goes with the rows into tables made of tables, whose totals stay the measured ones", () => {
    const dry = { ...source, id: "dry", source: { file: "dry.csv" } };
    const page = run([
      asked,
      dry,
      { id: "all", kind: "data", stack: ["ch", "dry"] },
      { id: "wide", kind: "data", stack: ["all"], renormalise: "volatile-free" },
    ]);
    const all = dataOf(page, "all");
    expect(valuesOf(all, "SiO2")[0]).toBeCloseTo((42 * 100) / sums.A, 10);
    expect(valuesOf(all, "SiO2")[4]).toBe(42);
    expect(all.totals?.[0]).toBeCloseTo(sums.A + 7.2, 10);
    expect(all.totals?.[4]).toBeCloseTo(sums.A + 7.2, 10);
    expect(tableOf(all).renormalised).toMatch(/^Values of ch are/u);
    // What is 100 wt% already stays; what is not is brought there.
    const wide = dataOf(page, "wide");
    for (const row of [0, 4]) expect(valuesOf(wide, "SiO2")[row]).toBeCloseTo((42 * 100) / sums.A, 10);
    expect(wide.totals?.[0]).toBeCloseTo(sums.A + 7.2, 10);
    const node = page.engine.trace({ block: "wide", name: "MgO", index: 4 });
    expect(nodesOf(node ?? fail()).flatMap(({ cell }) => (cell === undefined ? [] : [cell]))).toMatchObject([{ block: "dry", row: 1, raw: "35.0" }]);
  });

  it("comes before replicates are merged: each analysis by its own sum", () => {
    const twice = csv.replace(/^B,/mu, "A,");
    const engine = createEngine();
    engine.setSource("ch.csv", new TextEncoder().encode(twice));
    const results = engine.evaluate(pageOf([{ ...asked, replicates: "mean" }]));
    const result = dataOf({ engine, results });
    expect(valuesOf(result, "SiO2")[0]).toBeCloseTo((4200 / sums.A + 4500 / sums.B) / 2, 10);
    // The measured means of all that has a number, K2O of one analysis alone; loss on ignition 3.8.
    const mean = 43.5 + 4.1 + 36.5 + 3.05 + 8.05 + 0.4 + 3.8 + 0.00115;
    expect(result.totals?.[0]).toBeCloseTo(mean, 10);
    const node = engine.trace({ block: "ch", name: "MgO", index: 0 }) ?? fail();
    expect(nodesOf(node).filter(({ label }) => label.startsWith("MgO × "))).toHaveLength(2);
    expect(
      nodesOf(node)
        .flatMap(({ cell }) => (cell === undefined ? [] : [cell.row]))
        .sort(),
    ).toEqual([1, 2]);
  });
});

function fail(): never {
  throw new Error("no trace");
}
