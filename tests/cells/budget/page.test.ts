import { describe, expect, it } from "vitest";
import { createEngine } from "../../../cells/page/engine";
import { readPageDocument } from "../../../cells/page/read";
import type { BudgetResult, PageResults, PlotResult, TrendResult } from "../../../cells/page/results";
import { resultsJson } from "../../../cells/page/resultsJson";
import { present } from "./budgets";

/** Rocks made up for tests: Al/Si falls as Mg/Si rises. */
const rocks = [
  ["R1", "CV", 0.8, 0.118],
  ["R2", "CV", 0.9, 0.111],
  ["R3", "CV", 1.0, 0.099],
  ["R4", "CO", 1.1, 0.091],
  ["R5", "CO", 1.2, 0.079],
] as const;

const data = {
  kind: "data",
  id: "ch",
  columns: [
    { name: "Sample", role: "sample" },
    { name: "Group", role: "class" },
    { name: "MgO", role: "quantity", species: "MgO", unit: "wt%" },
    { name: "sMg", role: "uncertainty", of: "MgO", as: "1 sigma" },
    { name: "Si", role: "quantity", species: "Si", unit: "wt%" },
    { name: "sSi", role: "uncertainty", of: "Si", as: "1 sigma" },
    { name: "Al", role: "quantity", species: "Al", unit: "µg/g" },
    { name: "sAl", role: "uncertainty", of: "Al", as: "1 sigma" },
  ],
  typed: rocks.map(([sample, group, mg, al], i) => ({
    id: `r${i + 1}`,
    cells: { Sample: sample, Group: group, MgO: String((mg * 20) / 0.603036), sMg: "0.2", Si: "20", sSi: "0.2", Al: String(al * 200_000), sAl: "300" },
  })),
};
const formula = { kind: "formula", id: "r", data: "ch", text: "mg_si = Mg / Si\nal_si = Al / Si" };
const trend = { kind: "trend", id: "t", data: "ch", x: "mg_si", y: "al_si", method: "york" };
const budget = {
  kind: "budget",
  id: "b",
  start: { body: "BSE" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
  target: { trend: "t" },
  report: ["r.mg_si", "r.al_si"],
};

function evaluate(...blocks: object[]): PageResults {
  const page = { format: "cotectic-page/1", title: "", bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" }, blocks };
  return createEngine().evaluate(readPageDocument(page));
}

describe("budgets on a page", () => {
  it("reach a trend in its own lines, report lines of formulas, and are drawn on the trend's plot", () => {
    const plot = { kind: "plot", id: "p", plot: "scatter", drawn: [{ data: "ch", x: "mg_si", y: "al_si" }, { trend: "t" }, { budget: "b" }] };
    const results = evaluate(data, formula, trend, budget, plot);
    const solved = results.blocks.get("b") as BudgetResult;
    expect(solved.problems.filter(({ severity }) => severity === "error")).toEqual([]);
    const line = results.blocks.get("t") as TrendResult;
    const [x, y] = solved.report.map(({ end }) => present(end));
    expect(y).toBeCloseTo(present(line.intercept?.value) + present(line.slope?.value) * present(x), 12);
    // Both ratios of BSE shrink alike, so the path is the ray through the origin: k (a₀ − b x₀) = a.
    const k = present(line.intercept?.value) / (0.0235 / 0.21 - (present(line.slope?.value) * 0.228) / 0.21);
    expect(present(x)).toBeCloseTo((k * 0.228) / 0.21, 10);
    expect(solved.shares[0]?.input).toMatch(/of t/u);
    const drawn = (results.blocks.get("p") as PlotResult).layers.find(({ what }) => what === "path");
    if (drawn?.what !== "path") throw new Error(JSON.stringify((results.blocks.get("p") as PlotResult).problems));
    expect(drawn.end?.x).toBeCloseTo(present(x), 12);
    expect(drawn.end?.y).toBeCloseTo(present(y), 12);
  });

  it("start from a sample or a class of a table, and aim at a sample", () => {
    const sample = {
      ...budget,
      id: "s",
      start: { data: "ch", sample: "R5" },
      target: { expression: "Mg / Si", equals: { data: "ch", sample: "R2" } },
      report: ["Mg / Si"],
    };
    const mean = { ...sample, id: "m", start: { data: "ch", class: "CO" } };
    const results = evaluate(data, sample, mean);
    const [one, two] = ["s", "m"].map((id) => results.blocks.get(id) as BudgetResult);
    // s = (1 − f)(Mg/T − Si)/f with Mg = 1.2 × 20, Si = 20, T = 0.9; MgO is rounded to six digits of the factor.
    expect(one?.solved?.value).toBeCloseTo((0.677 * (24 / 0.9 - 20)) / 0.323, 4);
    expect(two?.solved?.value).toBeCloseTo((0.677 * (23 / 0.9 - 20)) / 0.323, 4);
    expect(one?.solved?.sigmaIs).toBeUndefined();
    expect(one?.byCompilation).toEqual([]);
  });

  it("say it where they are calculated from themselves", () => {
    const results = evaluate(
      { ...budget, target: { expression: "Mg / Si", equals: { body: "CI" } }, report: ["q.whole"] },
      { kind: "formula", id: "q", text: "whole = b.solved * Mg / Si" },
    );
    const { ok, problems } = results.blocks.get("b") as BudgetResult;
    expect(ok).toBe(false);
    expect(problems.map(({ code }) => code)).toContain("circle");
  });

  it("trace the solved amount down to the metal's share, the fit and the body", () => {
    const engine = createEngine();
    const page = { format: "cotectic-page/1", title: "", bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" }, blocks: [data, formula, trend, budget] };
    engine.evaluate(readPageDocument(page));
    const labels = engine.trace({ block: "b", name: "solved" })?.from.map(({ label }) => label) ?? [];
    expect(labels).toContain("metal's share of the whole");
    expect(labels.some((label) => label.includes("BSE_MS95"))).toBe(true);
    expect(labels.some((label) => label.includes(" of t"))).toBe(true);
  });

  it("give their amount to formulas", () => {
    const used = { kind: "formula", id: "q", text: "half = b.solved / 2" };
    const results = evaluate(data, formula, trend, budget, used);
    const line = results.blocks.get("q");
    const solved = results.blocks.get("b") as BudgetResult;
    if (line?.kind !== "formula") throw new Error("expected a formula");
    expect(line.lines[0]?.value[0]).toBeCloseTo(present(solved.solved?.value) / 2, 12);
    expect(line.lines[0]?.unit).toBe("wt%");
  });

  it("say what is wrong with the block they start from, and hold no NaN in JSON", () => {
    const results = evaluate({ ...budget, start: { data: "nowhere", sample: "R1" } });
    const broken = results.blocks.get("b") as BudgetResult;
    expect(broken.ok).toBe(false);
    expect(broken.problems.length).toBeGreaterThan(0);
    const whole = evaluate(data, formula, trend, budget);
    expect(JSON.stringify(resultsJson(whole))).not.toContain("NaN");
    const numbers = JSON.stringify(whole.blocks.get("b"), (_, value: unknown) => (typeof value === "number" && !Number.isFinite(value) ? "not finite" : value));
    expect(numbers).not.toContain("not finite");
  });
});
