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
});
