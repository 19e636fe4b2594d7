import { describe, expect, it } from "vitest";
import { condensationTemperature } from "@/cells";
import { data, errorsOf, evaluate, ratios, resultOf, trend } from "../page/pages";

describe("a distribution", () => {
  const plot = (drawn: readonly object[]): object => ({ id: "p", kind: "plot", plot: "distribution", drawn });

  it("needs a value across only", () => {
    const results = evaluate(data(), ratios, plot([{ data: "ch", x: "Ca / Si" }, { bodies: ["CI"] }]));
    const result = resultOf(results, "p", "plot");
    expect(errorsOf(results, "p")).toEqual([]);
    expect(result.drawn).toBe(7);
    expect(result.notDrawn).toEqual({ missing: 1, "below detection": 1 });
    const [samples, bodies] = result.layers;
    if (samples?.what !== "samples" || bodies?.what !== "bodies") throw new Error("samples and bodies are drawn");
    expect(samples.points.y.every(Number.isNaN)).toBe(true);
    expect(bodies.bodies[0]?.sigmaY).toBeNull();
  });

  it("refuses a trend in words", () => {
    const results = evaluate(data(), ratios, trend("t", "CV"), plot([{ data: "ch", x: "mg_si" }, { trend: "t" }]));
    expect(errorsOf(results, "p")).toMatchObject([{ code: "not-drawn-here", field: "drawn[1]" }]);
  });
});

describe("a ternary", () => {
  const plot = (drawn: readonly object[]): object => ({ id: "p", kind: "plot", plot: "ternary", drawn });

  it("shows shares of the sum of its three corners, and its axes say so", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", x: "MgO", y: "SiO2", z: "Al2O3" }, { bodies: ["CI"] }])), "p", "plot");
    expect(result.x.label).toBe("MgO/(MgO + SiO2 + Al2O3)");
    const [samples] = result.layers;
    if (samples?.what !== "samples") throw new Error("samples are drawn");
    expect(samples.points.x[0]).toBeCloseTo(24.1 / (24.1 + 34 + 3.2), 12);
    expect(samples.points.y[0]).toBeCloseTo(34 / (24.1 + 34 + 3.2), 12);
    // Shares of one sum pull against each other.
    expect(samples.points.correlation[0]).toBeLessThan(-0.5);
    expect(result.layers[1]?.what).toBe("bodies");
  });

  it("asks for its third corner", () => {
    const results = evaluate(data(), plot([{ data: "ch", x: "MgO", y: "SiO2" }]));
    expect(errorsOf(results, "p")[0]).toMatchObject({ code: "no-axis", field: "drawn[0].z" });
  });

  it("does not add what cannot be added", () => {
    const results = evaluate(data(), plot([{ data: "ch", x: "Mg", y: "atoms(Si)", z: "Al" }]));
    expect(errorsOf(results, "p")[0]?.code).toMatch(/mismatch/);
    expect(resultOf(results, "p", "plot").layers).toEqual([]);
  });

  it("names its corners, and takes them from itself where only bodies are drawn", () => {
    const own = { id: "p", kind: "plot", plot: "ternary", x: "Mg", y: "Si", z: "Al", drawn: [{ bodies: ["CI"] }] };
    const result = resultOf(evaluate(own), "p", "plot");
    expect(result.corners).toEqual({ x: "Mg", y: "Si", z: "Al" });
    const [bodies] = result.layers;
    // Palme, Lodders & Jones 2014: Mg 9.54, Si 10.70, Al 0.840 wt%.
    expect(bodies?.what === "bodies" ? bodies.bodies[0]?.x : undefined).toBeCloseTo(9.54 / (9.54 + 10.7 + 0.84), 10);
  });

  it("draws a mixing path, which is straight here where shares of one sum are mixed", () => {
    const budget = { id: "b", kind: "budget", start: { body: "CI" }, steps: [{ do: "mix", what: { phase: "forsterite" }, amount: { from: 0, to: 1 } }] };
    const results = evaluate(data(), budget, {
      id: "p",
      kind: "plot",
      plot: "ternary",
      x: "Mg",
      y: "Si",
      z: "Al",
      drawn: [{ bodies: ["CI"] }, { budget: "b" }],
    });
    expect(errorsOf(results, "p")).toEqual([]);
    const path = resultOf(results, "p", "plot").layers.find((layer) => layer.what === "path");
    if (path?.what !== "path") throw new Error("the path is drawn");
    const { x, y } = path.line;
    const [x0 = 0, y0 = 0, x1 = 0, y1 = 0] = [x[0], y[0], x.at(-1), y.at(-1)];
    // Forsterite has no aluminium: the path ends on the edge across from that corner, at Mg/(Mg + Si) of 2 Mg + Si by mass.
    expect(x1 + y1).toBeCloseTo(1, 12);
    expect(x1).toBeCloseTo((2 * 24.305) / (2 * 24.305 + 28.085), 4);
    x.forEach((at, i) => expect((at - x0) * (y1 - y0) - ((y[i] ?? 0) - y0) * (x1 - x0)).toBeCloseTo(0, 12));
  });

  it("leaves a sample outside its triangle out, and says so", () => {
    const results = evaluate(data(), plot([{ data: "ch", x: "MgO - wtpct(24)", y: "SiO2", z: "Al2O3" }]));
    const result = resultOf(results, "p", "plot");
    // S3 and S7 have less than 24 wt% MgO, S5 exactly 24.
    expect(result.notDrawn).toEqual({ "out of domain": 2 });
    expect(result.problems.map(({ code }) => code)).toEqual(["outside-triangle"]);
  });
});

describe("a pattern", () => {
  const plot = (drawn: readonly object[], more: object = {}): object => ({ id: "p", kind: "plot", plot: "pattern", normalise: "CI", drawn, ...more });

  it("stands against condensation temperature, every value normalised to a body that the axis names", () => {
    const results = evaluate(data(), plot([{ data: "ch", values: ["Al", "Mg", "Si"] }], { order: "condensation temperature" }));
    const result = resultOf(results, "p", "plot");
    expect(errorsOf(results, "p")).toEqual([]);
    expect(result.y.label).toBe("normalised to CI (CI_PLJ14)");
    expect(result.x.unit).toBe("K");
    expect(result.bodiesUsed).toEqual({ CI: "CI_PLJ14" });
    const places = result.layers.map((layer) => (layer.what === "samples" ? layer.points.x[0] : undefined));
    expect(places).toEqual(["Al", "Mg", "Si"].map((element) => condensationTemperature(element)?.t50));
    const [aluminium] = result.layers;
    // Al = Al2O3 × 0.529251; CI has 0.840 wt% (Palme, Lodders & Jones 2014).
    expect(aluminium?.what === "samples" ? aluminium.points.y[0] : undefined).toBeCloseTo((3.2 * 0.52925) / 0.84, 3);
    expect(result.drawn).toBe(9);
  });

  it("stands in a given order, of samples and bodies alike", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch" }, { bodies: ["BSE"] }], { order: ["Si", "Mg", "Al"] })), "p", "plot");
    const first = result.layers.flatMap((layer) => (layer.what === "samples" ? [layer.points.x[0]] : []));
    expect(first).toEqual([1, 2, 3]);
    const bodies = result.layers.find((layer) => layer.what === "bodies");
    expect(bodies?.what === "bodies" ? bodies.bodies.map(({ name, x }) => [name, x]) : []).toEqual([
      ["BSE Si", 1],
      ["BSE Mg", 2],
      ["BSE Al", 3],
    ]);
    expect(result.x.label).toBe("Si, Mg, Al");
  });

  it("is refused without a body that normalises it, and with one nobody knows", () => {
    expect(errorsOf(evaluate(data(), plot([{ data: "ch" }], { normalise: undefined })), "p")).toMatchObject([{ code: "no-normaliser", field: "normalise" }]);
    expect(errorsOf(evaluate(data(), plot([{ data: "ch" }], { normalise: "NOWHERE" })), "p")).toMatchObject([{ code: "unknown-body", field: "normalise" }]);
  });

  it("says which value has no condensation temperature, and draws the others", () => {
    const results = evaluate(data(), plot([{ data: "ch", values: ["Mg / Si", "Al"] }]));
    expect(errorsOf(results, "p")).toMatchObject([{ code: "no-condensation-temperature", field: "drawn[0].values[0]" }]);
    expect(resultOf(results, "p", "plot").layers).toHaveLength(1);
  });

  it("stands evenly in the order of condensation, with every column's temperature", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", values: ["Si", "Al", "Mg"] }], { order: "condensation order" })), "p", "plot");
    expect(result.columns).toEqual([
      { of: "Al", x: 1, temperature: 1653 },
      { of: "Mg", x: 2, temperature: 1336 },
      { of: "Si", x: 3, temperature: 1310 },
    ]);
    expect(result.layers.map((layer) => (layer.what === "samples" ? [layer.of, layer.points.x[0]] : []))).toEqual([
      ["Al", 1],
      ["Mg", 2],
      ["Si", 3],
    ]);
  });

  it("lists the columns of temperatures with the most refractory first, whatever is typed first", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", values: ["Si", "Al"] }])), "p", "plot");
    expect(result.columns?.map(({ of }) => of)).toEqual(["Al", "Si"]);
  });

  it("is relative to an element where one is given, on samples and bodies alike", () => {
    const results = evaluate(data(), plot([{ data: "ch", values: ["Al", "Si"] }, { bodies: ["CI"] }], { per: "Si" }));
    const result = resultOf(results, "p", "plot");
    expect(result.y.label).toBe("relative to Si, normalised to CI (CI_PLJ14)");
    const [al, si, bodies] = result.layers;
    // CI: Al 0.840, Si 10.70 wt% (Palme, Lodders & Jones 2014); S1: Al2O3 3.2, SiO2 34.0 wt%.
    expect(al?.what === "samples" ? al.points.y[0] : undefined).toBeCloseTo((3.2 * 0.52925) / (34 * 0.46744) / (0.84 / 10.7), 3);
    expect(si?.what === "samples" ? [si.points.y[0], si.points.sigmaY[0]] : undefined).toEqual([1, 0]);
    expect(bodies?.what === "bodies" ? bodies.bodies.map(({ y }) => y) : undefined).toEqual([1, 1]);
  });

  it("draws class means with the σ of the mean, and the normalising body's once", () => {
    const results = evaluate(data(), plot([{ data: "ch", values: ["Al", "Ca"], join: "class" }]));
    const result = resultOf(results, "p", "plot");
    expect(result.drawn).toBe(9);
    const [means] = result.layers;
    if (means?.what !== "means") throw new Error("means are drawn");
    expect(means.classes.map(({ name, samples }) => [name, samples])).toEqual([
      ["CV", 4],
      ["CO", 4],
      ["XX", 1],
    ]);
    const [al, ca] = means.classes[0]?.points ?? [];
    // By hand from the four CV analyses: Al2O3 3.2 3.5 2.9 3.8, mean 3.35, sd √0.15, and CI's Al 0.840 wt% with 1σ of 6 % (PLJ14).
    const factor = 0.529251 / 0.84;
    expect(al?.y).toBeCloseTo(3.35 * factor, 4);
    const common = (al?.y ?? 0) * 0.06;
    expect(al?.sigmaY).toBeCloseTo(Math.hypot(Math.sqrt(0.15 / 4) * factor, common), 4);
    expect(ca?.n).toBe(4);
    // S7 is below detection: the mean of CO stands on three, and XX, one sample without CaO, has a gap there.
    expect(means.classes[1]?.points.map(({ of, n }) => [of, n])).toEqual([
      ["Al", 4],
      ["Ca", 3],
    ]);
    expect(result.problems.map(({ code, text }) => [code, text])).toEqual([
      ["mean-without-detection", "Values below detection are not in the means, so these are too high: Ca of CO (1)."],
    ]);
    expect(means.classes[2]?.points.map(({ of, sigmaY }) => [of, sigmaY])).toEqual([["Al", null]]);
  });

  it("says which values a logarithmic axis has no place for", () => {
    const results = evaluate(data(), plot([{ data: "ch", values: ["MgO - wtpct(24)"] }], { order: ["Mg"], yAxis: { scale: "log", from: 0 } }));
    const problems = resultOf(results, "p", "plot").problems.filter(({ code }) => code === "not-on-log-axis");
    expect(problems.map(({ field }) => field)).toEqual(["drawn[0]", "yAxis.from"]);
    // CI has less than 24 wt% MgO, so the ratio is above zero for S3 and S7 alone, which have less too.
    expect(problems[0]?.text).toContain("7 values of ch are not above zero");
  });
});
