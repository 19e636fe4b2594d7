import { describe, expect, it } from "vitest";
import type { BudgetResult, PlotResult, TrendResult } from "@/cells";
import { nodesOf, resultOf } from "../page/pages";
import { data, opened, ratios, trendOver, worstMiss, type Opened } from "./pageWithMany";

const budget = {
  id: "b",
  kind: "budget",
  start: { body: "BSE_PO14" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0.01 }, amount: "solve" }],
  target: { expression: "Mg / Si", equals: { body: "CI" } },
  report: ["Mg / Si", "Al / Si"],
};

const plots = [
  { id: "p", kind: "plot", plot: "scatter", x: "mg_si", y: "al_si", drawn: [{ data: "d" }, { bodies: ["CI"] }] },
  { id: "n", kind: "plot", plot: "pattern", normalise: "CI", drawn: [{ data: "d", values: ["Al", "Mg", "Si"] }, { bodies: ["BSE"] }] },
  { id: "m", kind: "plot", plot: "pattern", normalise: "CI", drawn: [{ data: "d", values: ["Al", "Mg"], join: "class" }] },
  { id: "t3", kind: "plot", plot: "ternary", x: "Mg", y: "Al", z: "Si", drawn: [{ data: "d" }] },
  { id: "h", kind: "plot", plot: "distribution", x: "mg_si", drawn: [{ data: "d" }] },
];

function page(): Opened {
  return opened([data, ratios, trendOver("ta", "a", { crossWith: "tb" }), trendOver("tb", "b"), budget, ...plots], 30, { CI: "CI_PLJ14", BSE: "BSE_PO14" });
}

describe("every number can be asked", () => {
  it("of a trend: MSWD, p and scatter, down to what each sample brings to S", () => {
    const { ask, results } = page();
    const result: TrendResult = resultOf(results, "ta", "trend");
    for (const name of ["mswd", "p"] as const) {
      const node = ask({ block: "ta", name });
      expect(node.value).toBe(result[name]);
      expect(node.from).toHaveLength(30);
      const parts = node.from.map(({ notes }) => Number(/: (?<part>[\d.e−-]+),/u.exec(notes[0] ?? "")?.groups?.["part"]?.replace("−", "-")));
      const sum = parts.reduce((a, b) => a + b, 0);
      expect(sum / (result.S ?? Number.NaN)).toBeCloseTo(1, 2);
    }
    expect(ask({ block: "ta", name: "covariance" }).value).toBe(result.usesScatter === true ? result.covarianceWithScatter : result.covariance);
  });

  it("of a trend: distances of bodies from line and crossing, whose σ is shared out to 1", () => {
    const { ask, results } = page();
    const result: TrendResult = resultOf(results, "ta", "trend");
    expect(result.fromBodies.length).toBeGreaterThan(0);
    for (const { body, distance } of result.fromBodies) {
      const node = ask({ block: "ta", name: `from_${body}` });
      expect(node.value).toBe(distance);
      expect(worstMiss(node)).toBeLessThan(1e-9);
    }
    for (const { body, distance } of result.crossing?.fromBodies ?? []) {
      const node = ask({ block: "ta", name: `crossing.from_${body}` });
      expect(node.value).toBe(distance);
      expect(worstMiss(node)).toBeLessThan(1e-9);
      expect(nodesOf(node).some(({ kind }) => kind === "body")).toBe(true);
    }
  });

  it("of a budget: start, end, target and miss of each report, and what was left behind", () => {
    const { ask, results } = page();
    const result: BudgetResult = resultOf(results, "b", "budget");
    const report = result.report.find(({ expression }) => expression === "Al / Si");
    expect(ask({ block: "b", name: "Al/Si.start" })).toMatchObject({ value: report?.start, sigma: report?.startSigma });
    expect(ask({ block: "b", name: "Al / Si.target" })).toMatchObject({ value: report?.target, sigma: report?.targetSigma });
    expect(ask({ block: "b", name: "Al / Si.end" })).toMatchObject({ value: report?.end, sigma: report?.sigma });
    const miss = ask({ block: "b", name: "Al / Si.miss" });
    expect(miss).toMatchObject({ value: report?.miss, unit: "σ", share: 1 });
    for (const name of ["Al / Si.start", "Al / Si.miss", "left.mass"]) expect(worstMiss(ask({ block: "b", name })), name).toBeLessThan(1e-9);
    expect(ask({ block: "b", name: "left.mass" })).toMatchObject({ value: result.left?.mass });
    expect(ask({ block: "b", name: "left.mass" }).sigma).toBeCloseTo(0.01, 12);
    // What was left is metal whose silicon was solved for: its σ is that of the solved amount.
    expect(ask({ block: "b", name: "left.Si" }).value).toBeCloseTo(100 * (result.left?.composition["Si"] ?? Number.NaN), 10);
    expect(ask({ block: "b", name: "left.Si" }).sigma).toBeCloseTo(result.solved?.sigma ?? Number.NaN, 8);
  });

  it("of plots: points, pattern values, shares in a ternary, bodies and class means, as they are drawn", () => {
    const { ask, results } = page();
    const samples = (id: string, of?: string): Extract<PlotResult["layers"][number], { what: "samples" }> => {
      const found = resultOf(results, id, "plot").layers.find((layer) => layer.what === "samples" && layer.of === of);
      if (found?.what !== "samples") throw new Error(`${id} draws no samples`);
      return found;
    };
    for (const [id, axes] of [
      ["p", "xy"],
      ["t3", "xy"],
      ["h", "x"],
    ] as const)
      for (const axis of axes) {
        const node = ask({ block: id, name: `0:${axis}`, index: 4 });
        const { points } = samples(id);
        expect(node.value, id).toBeCloseTo((axis === "x" ? points.x : points.y)[4] ?? Number.NaN, 12);
        expect(node.sigma, id).toBeCloseTo((axis === "x" ? points.sigmaX : points.sigmaY)[4] ?? Number.NaN, 12);
        expect(worstMiss(node), id).toBeLessThan(1e-9);
        expect(nodesOf(node).some(({ cell }) => cell?.row === 5)).toBe(true);
      }
    const { points } = samples("t3");
    expect(ask({ block: "t3", name: "0:z", index: 4 }).value).toBeCloseTo(1 - (points.x[4] ?? 0) - (points.y[4] ?? 0), 12);
    const pattern = ask({ block: "n", name: "0:Al", index: 4 });
    expect(pattern.value).toBe(samples("n", "Al").points.y[4]);
    expect(nodesOf(pattern).map(({ label }) => label)).toEqual(expect.arrayContaining(["Al of CI_PLJ14", "Al2O3"]));
    for (const [id, names] of [
      ["p", ["1:CI:x", "1:CI:y"]],
      ["n", ["1:BSE:Al"]],
    ] as const)
      for (const name of names) {
        const node = ask({ block: id, name });
        const layer = resultOf(results, id, "plot").layers.find((each) => each.what === "bodies");
        const body = layer?.what === "bodies" ? layer.bodies.find((each) => each.of === undefined || each.of === "Al") : undefined;
        expect(node.value).toBeCloseTo((name.endsWith("x") ? body?.x : body?.y) ?? Number.NaN, 12);
        expect(nodesOf(node).some(({ kind }) => kind === "body")).toBe(true);
      }
    const mean = ask({ block: "m", name: "0:a:Al" });
    const means = resultOf(results, "m", "plot").layers.find((layer) => layer.what === "means");
    const point = means?.what === "means" ? means.classes.find(({ name }) => name === "a")?.points.find(({ of }) => of === "Al") : undefined;
    expect(mean.value).toBeCloseTo(point?.y ?? Number.NaN, 12);
    expect(mean.sigma).toBeCloseTo(point?.sigmaY ?? Number.NaN, 12);
    expect(worstMiss(mean)).toBeLessThan(1e-9);
  });

  it("that a note quotes", () => {
    const text = "{{ta.mswd}} {{ta.p}} {{ta.from_CI}} {{ta.crossing_from_CI}} {{b.`Al / Si`.start}} {{b.`Al / Si`.target}} {{b.`Al / Si`.miss}}";
    const { ask, results } = opened(
      [data, ratios, trendOver("ta", "a", { crossWith: "tb" }), trendOver("tb", "b"), budget, { id: "note", kind: "note", text }],
      30,
      {
        CI: "CI_PLJ14",
      },
    );
    const { values } = resultOf(results, "note", "note");
    expect(values).toHaveLength(7);
    for (const { trace, value, name } of values) {
      if (trace === undefined) throw new Error(`${name} cannot be traced`);
      expect(ask(trace).value).toBe(value);
    }
  });

  it("and what is not there has no trace", () => {
    const { engine } = page();
    for (const [block, name] of [
      ["ta", "from_XX"],
      ["b", "Ca / Si.miss"],
      ["b", "left.Xx"],
      ["p", "7:x"],
      ["p", "0:q"],
      ["p", "x"],
      ["n", "0:Ca"],
    ] as const)
      expect(engine.trace({ block, name, index: 1 }), name).toBeNull();
  });
});
