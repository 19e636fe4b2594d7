import { describe, expect, it } from "vitest";
import { createEngine, readPageDocument, resultsJson, type Engine, type PageResults, type Quantiles, type TrendResult } from "@/cells";
import { createRandom } from "../../../cells/numeric";

const SEED = 20261201;
const draws = 20_000;
const simulate = { draws, seed: 7 };

/** Invented samples: two groups along two lines of Al/Si against Mg/Si, each moved by its own errors; σ small beside the values. */
function typed(error: number, scatter = 0): object[] {
  const random = createRandom(SEED);
  return Array.from({ length: 16 }, (_, i) => {
    const [first, place] = [i < 8, i % 8];
    const x = first ? 0.7 + 0.05 * place : 1.05 + 0.05 * place;
    const y = (first ? 0.1 + 0.16 * (x - 1) : 0.105 - 0.12 * (x - 1)) + scatter * random.normal();
    const si = 20 + 0.1 * i;
    const off = (value: number): string => String(value * (1 + error * random.normal()));
    const cells = { Sample: `S${i + 1}`, Group: first ? "CV" : "rock", Mg: off(si * x), Al: off(si * y), Si: off(si) };
    const sigmas = Object.fromEntries((["Mg", "Al", "Si"] as const).map((name) => [`s${name}`, String(Number(cells[name]) * error)]));
    return { id: `r${i + 1}`, cells: { ...cells, ...sigmas } };
  });
}

const quantity = (name: string): object[] => [
  { name, header: name, role: "quantity", species: name, unit: "wt%" },
  { name: `s${name}`, header: `s${name}`, role: "uncertainty", of: name, as: "1 sigma" },
];
const columns = [{ name: "Sample", role: "sample" }, { name: "Group", role: "class" }, ...["Mg", "Al", "Si"].flatMap(quantity)];
const ch = (more: object = {}, error = 0.004, scatter = 0): object => ({ id: "ch", kind: "data", typed: typed(error, scatter), columns, ...more });
const t = (fields: object = {}, id = "t"): object => ({ id, kind: "trend", data: "ch", x: "Mg / Si", y: "Al / Si", method: "york", simulate, ...fields });
const CV = { where: 'Group == "CV"' };
const rock = { where: 'Group == "rock"' };

function pageOf(blocks: readonly object[]): Parameters<Engine["evaluate"]>[0] {
  return readPageDocument({ format: "cotectic-page/1", title: "Invented", bodies: { CI: "CI_PLJ14" }, blocks });
}

function evaluate(...blocks: object[]): PageResults {
  return createEngine().evaluate(pageOf(blocks));
}

type Simulated = TrendResult & { readonly simulated: NonNullable<TrendResult["simulated"]> };

function trendOf(results: PageResults, id = "t"): Simulated {
  const result = results.blocks.get(id);
  if (result?.kind !== "trend") throw new Error(`${id} is no trend`);
  expect(result.problems.filter(({ severity }) => severity === "error")).toEqual([]);
  if (result.simulated === undefined) throw new Error(`${id} is not simulated: ${result.problems.map(({ text }) => text).join(" ")}`);
  return { ...result, simulated: result.simulated };
}

/** Relative standard error of half the range of 68 % of normal draws: 0.96/√n (Kendall & Stuart 1977, 10.10, for two quantiles). */
const WIDTH_ERROR = 0.96 / Math.sqrt(draws);
/** Standard error of the median in σ: 1.2533/√n. */
const MEDIAN_ERROR = 1.2533 / Math.sqrt(draws);

/** Bound: 4 standard errors of the simulation, and what second order may add. */
function agrees(found: Quantiles | null | undefined, value: number, sigma: number | null | undefined, secondOrder = 0.01): void {
  if (found == null || sigma == null) throw new Error("nothing to compare");
  expect(Math.abs((found.to68 - found.from68) / 2 / sigma - 1)).toBeLessThan(4 * WIDTH_ERROR + secondOrder);
  expect(Math.abs(found.median - value) / sigma).toBeLessThan(4 * MEDIAN_ERROR + secondOrder);
  // 95 % lie within ±1.96σ; the standard error of such an end is 2.67 σ/√n.
  expect(Math.abs((found.to95 - found.from95) / 2 / sigma - 1.959964)).toBeLessThan((4 * 2.67) / Math.sqrt(draws) + 2 * secondOrder);
}

describe("simulated trends", () => {
  it("agree with York's σ where errors are small", () => {
    const { simulated, slope, intercept, usesScatter } = trendOf(evaluate(ch(), t(CV)));
    expect(usesScatter).toBe(false);
    agrees(simulated.slope, slope?.value ?? NaN, slope?.sigma);
    agrees(simulated.intercept, intercept?.value ?? NaN, intercept?.sigma);
    expect(simulated).toMatchObject({ ...simulate, withoutLine: 0 });
    expect(simulated.crossing).toBeUndefined();
  });

  it.each([0.8, -0.5])("move x and y of a sample together, with a declared correlation of %f too", (value) => {
    const { simulated, slope } = trendOf(evaluate(ch({ correlations: [{ of: ["Al", "Si"], value }] }), t(CV)));
    agrees(simulated.slope, slope?.value ?? NaN, slope?.sigma);
  });

  it("draw what is common to all samples once a draw", () => {
    const { simulated, slope, intercept } = trendOf(evaluate(ch(), t({ ...CV, x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" })));
    agrees(simulated.slope, slope?.value ?? NaN, slope?.sigma, 0.02);
    agrees(simulated.intercept, intercept?.value ?? NaN, intercept?.sigma, 0.02);
    // The samples alone would make a much smaller σ: the body's counts.
    const alone = trendOf(evaluate(ch(), t(CV)));
    expect((slope?.sigma ?? 0) / (slope?.value ?? 1)).toBeGreaterThan((1.3 * (alone.slope?.sigma ?? 0)) / (alone.slope?.value ?? 1));
  });

  it("draw the scatter that the line in use counts beyond the errors", () => {
    const { simulated, slope, usesScatter } = trendOf(evaluate(ch({}, 0.002, 0.002), t(CV)));
    expect(usesScatter).toBe(true);
    agrees(simulated.slope, slope?.value ?? NaN, slope?.sigmaWithScatter, 0.03);
  });

  it("agree with the delta method for a crossing, also where the second line goes through the same samples", () => {
    const results = evaluate(ch(), t({ ...CV, crossWith: "other" }), t({ ...rock, simulate: undefined }, "other"));
    const { simulated, crossing } = trendOf(results);
    agrees(simulated.crossing?.x, crossing?.x.value ?? NaN, crossing?.x.sigma, 0.02);
    agrees(simulated.crossing?.y, crossing?.y.value ?? NaN, crossing?.y.sigma, 0.02);
    expect(simulated.crossing?.withoutCrossing).toBe(0);
    // Mg/Si against Al/Si and against 2 Al/Si − 0.1 of the same samples: what they share decides how well the crossing is known.
    const shared = trendOf(evaluate(ch(), t({ ...CV, crossWith: "twice" }), t({ ...CV, y: "2 * Al / Si - 0.1", simulate: undefined }, "twice")));
    agrees(shared.simulated.crossing?.x, shared.crossing?.x.value ?? NaN, shared.crossing?.x.sigma, 0.02);
    // y = 2y − 0.1 is at 0.1 whatever the samples are: drawn apart, the lines would not know that.
    const { from95 = NaN, to95 = NaN } = shared.simulated.crossing?.y ?? {};
    expect(Math.max(Math.abs(from95 - 0.1), Math.abs(to95 - 0.1))).toBeLessThan(1e-10);
  });

  it("know a sample again by way of a stack", () => {
    const all = { id: "all", kind: "data", stack: ["ch"] };
    const other = t({ ...CV, data: "all", y: "2 * Al / Si - 0.1", simulate: undefined }, "twice");
    const found = trendOf(evaluate(ch(), all, t({ ...CV, crossWith: "twice" }), other)).simulated.crossing;
    const same = trendOf(evaluate(ch(), t({ ...CV, crossWith: "twice" }), { ...other, data: "ch" })).simulated.crossing;
    expect(found).toEqual(same);
  });

  it("go through class means with the errors of the means", () => {
    const { simulated, slope } = trendOf(evaluate(ch({ typed: manyClasses() }), t({ x: "mean(Mg / Si, Group)", y: "mean(Al / Si, Group)" })));
    agrees(simulated.slope, slope?.value ?? NaN, slope?.sigmaWithScatter ?? slope?.sigma, 0.05);
  });

  it("say of the other methods that draws and σ answer different questions", () => {
    for (const method of ["ordinary least squares", "reduced major axis", "theil-sen"]) {
      const { simulated, problems, slope } = trendOf(evaluate(ch(), t({ ...CV, method, simulate: { draws: 500, seed: 1 } })));
      expect(problems.map(({ code }) => code)).toContain("simulated-errors-alone");
      expect(Math.abs((simulated.slope?.median ?? NaN) - (slope?.value ?? NaN))).toBeLessThan(5 * (slope?.sigma ?? NaN));
    }
  });

  it("agree with what least squares make of errors in y alone: σ² = Σ u²σ²/(Σ u²)²", () => {
    const rows = Array.from({ length: 9 }, (_, i) => ({
      id: `r${i}`,
      cells: { Sample: `S${i}`, X: String(i), Y: String(3 * i + (i % 3)), sX: "0", sY: String(0.2 + 0.1 * i) },
    }));
    const plain = (name: string): object[] => [
      { name, header: name, role: "quantity", unit: "1" },
      { name: `s${name}`, header: `s${name}`, role: "uncertainty", of: name, as: "1 sigma" },
    ];
    const data = { id: "ch", kind: "data", typed: rows, columns: [{ name: "Sample", role: "sample" }, ...["X", "Y"].flatMap(plain)] };
    const { simulated, slope } = trendOf(evaluate(data, t({ x: "X", y: "Y", method: "ordinary least squares" })));
    let [top, bottom] = [0, 0];
    for (let i = 0; i < 9; i++) {
      const [u, sigma] = [i - 4, 0.2 + 0.1 * i];
      top += u * u * sigma * sigma;
      bottom += u * u;
    }
    agrees(simulated.slope, slope?.value ?? NaN, Math.sqrt(top) / bottom, 0);
  });

  it("say so where no error is known, and where the crossing is refused the line alone is simulated", () => {
    const bare = { ...ch(), columns: columns.filter((column) => !("role" in column && column.role === "uncertainty")) };
    const result = evaluate(bare, t({ ...CV, method: "ordinary least squares" })).blocks.get("t");
    expect(result?.kind === "trend" && result.simulated).toBeUndefined();
    expect(result?.problems.map(({ code }) => code)).toContain("nothing-to-simulate");
    const alike = evaluate(ch(), t({ ...CV, crossWith: "half" }), t({ where: 'Sample != "S1" and Group == "CV"', simulate: undefined }, "half")).blocks.get(
      "t",
    );
    if (alike?.kind !== "trend") throw new Error("no trend");
    expect(alike.crossing).toBeUndefined();
    expect(alike.simulated?.slope).not.toBeNull();
    expect(alike.simulated?.crossing).toBeUndefined();
  });

  it("are the same to the bit in every run, however they are cut, and whatever else stands on the page", () => {
    const wish = { simulate: { draws: 300, seed: 5 } };
    const blocks = [ch(), t({ ...CV, ...wish, crossWith: "other" }), t({ ...rock, ...wish }, "other")];
    const whole = trendOf(evaluate(...blocks)).simulated;
    expect(trendOf(evaluate(...blocks)).simulated).toEqual(whole);
    const more = [
      { id: "r", kind: "formula", data: "ch", text: "more = Mg / Al\nstill = norm(Mg, CI)", ...wish },
      ...blocks,
      { id: "u", kind: "trend", data: "ch", x: "Mg / Al", y: "Si / Al", method: "york", ...wish },
    ];
    expect(trendOf(evaluate(...more)).simulated).toEqual(whole);
    const engine = createEngine();
    const putOff = engine.evaluate(pageOf(blocks), "later");
    expect([...(putOff.simulations?.keys() ?? [])]).toEqual(["t", "other"]);
    expect(putOff.blocks.get("t")).not.toHaveProperty("simulated");
    for (const simulation of putOff.simulations?.values() ?? []) {
      let parts = 1;
      while (simulation.advance()) parts++;
      expect(parts).toBeGreaterThan(300);
      expect(simulation.done).toBe(300);
    }
    expect(trendOf(engine.evaluate(pageOf(blocks), "later")).simulated).toEqual(whole);
    expect(trendOf(evaluate(ch(), t({ ...CV, simulate: { draws: 300, seed: 6 }, crossWith: "other" }), t(rock, "other"))).simulated).not.toEqual(whole);
  });

  it("leave first order as it is, and stand in JSON and in the trace", () => {
    const blocks = (asked: boolean): object[] => [
      ch(),
      t({ ...CV, crossWith: "other", ...(asked ? { simulate: { draws: 300, seed: 5 } } : { simulate: undefined }) }),
      t({ ...rock, simulate: undefined }, "other"),
    ];
    const engine = createEngine();
    const [asked, not] = [engine.evaluate(pageOf(blocks(true))), evaluate(...blocks(false))];
    const json = JSON.parse(JSON.stringify(resultsJson(asked))) as { blocks: Record<string, { simulated?: unknown }> };
    const { simulated, ...first } = json.blocks["t"] ?? {};
    expect(first).toEqual((JSON.parse(JSON.stringify(resultsJson(not))) as typeof json).blocks["t"]);
    const own = trendOf(asked).simulated;
    expect(simulated).toEqual(own);
    for (const [name, of] of [
      ["slope", own.slope],
      ["intercept", own.intercept],
      ["crossing.x", own.crossing?.x],
      ["crossing.y", own.crossing?.y],
    ] as const)
      expect(engine.trace({ block: "t", name })?.simulated).toEqual({ draws: 300, seed: 5, ...of, withoutValue: 0 });
  });
});

/** Six classes of six samples along a line, spread within each class. */
function manyClasses(): object[] {
  const random = createRandom(SEED + 1);
  return Array.from({ length: 36 }, (_, i) => {
    const x = 0.7 + 0.06 * (i % 6) + 0.004 * random.normal();
    const y = 0.1 + 0.16 * (0.7 + 0.06 * (i % 6) - 1) + 0.0008 * random.normal();
    return {
      id: `r${i}`,
      cells: { Sample: `S${i}`, Group: `G${i % 6}`, Mg: String(20 * x), Al: String(20 * y), Si: "20", sMg: "0.1", sAl: "0.01", sSi: "0.1" },
    };
  });
}
