import { describe, expect, it } from "vitest";
import { complete, compileOnComposition, evaluateCondition, evaluateExpression, type Evaluated } from "../../../cells/language";
import { State } from "../../../cells/quantity/state";
import { bodyLookup } from "../../../cells/species";
import { errorOf, scopeOf, tableOf } from "./scopes";

const table = tableOf(
  {
    x: { unit: "1", basis: "mass", value: [1, 2, 4, null, "<", 100], sigma: [0.1, 0.1, 0.2, null, null, 1] },
    y: { unit: "1", basis: "mass", value: [2, 4, 8, 1, 1, 1], sigma: [0.1, 0.2, 0.4, 0.1, 0.1, 0.1] },
    zero: { unit: "1", basis: "mass", value: [0, 1, -1, 0, 0, 0], sigma: [0, 0, 0, 0, 0, 0] },
    Group: ["A", "A", "B", "B", "A", "B"],
    lab: ["p", "q", "p", "q", "p", "q"],
  },
  { setAside: [5] },
);
const scope = scopeOf(table);
const evaluate = (text: string): Evaluated => evaluateExpression(scope, text, { block: "r" });
const where = (text: string): number[] => [...evaluateCondition(scope, text, { block: "r", field: "where" })];
const { present, missing, belowDetection, outOfDomain, setAside } = State;

describe("states", () => {
  it.each<[string, number[]]>([
    ["x", [present, present, present, missing, belowDetection, setAside]],
    ["x + y", [present, present, present, missing, belowDetection, setAside]],
    ["y / zero", [outOfDomain, present, present, outOfDomain, outOfDomain, setAside]],
    ["1 / (1 / zero)", [outOfDomain, present, present, outOfDomain, outOfDomain, setAside]],
    ["log10(zero)", [outOfDomain, present, outOfDomain, outOfDomain, outOfDomain, setAside]],
    ["exp(ln(zero))", [outOfDomain, present, outOfDomain, outOfDomain, outOfDomain, setAside]],
    ["sqrt(zero)", [present, present, outOfDomain, present, present, setAside]],
    ["zero ^ 0.3", [present, present, outOfDomain, present, present, setAside]],
    ["is_missing(x) ? y : x", [present, present, present, present, belowDetection, setAside]],
    ["is_missing(x) or is_below(x) ? y : x", [present, present, present, present, present, setAside]],
    ["x > 1 ? 1 : 0", [present, present, present, missing, belowDetection, setAside]],
    ["zero == 0 ? 0 : y / zero", [present, present, present, present, present, setAside]],
    ["sqrt(zero) > 2 ? 1 : 0", [present, present, outOfDomain, present, present, setAside]],
  ])("%s", (text, states) => {
    const result = evaluate(text);
    expect([...result.state]).toEqual(states);
    result.state.forEach((state, row) => expect(Number.isNaN(result.value[row])).toBe(state !== present));
  });

  it("never turns below detection into a number", () => {
    expect(evaluate("x").value[4]).toBeNaN();
  });

  it("of a side not chosen, or its σ, does not matter", () => {
    const result = evaluate("is_missing(x) ? y : x");
    expect(result.value[3]).toBe(1);
    expect(result.sigma[3]).toBeCloseTo(0.1, 12);
    expect(evaluate("zero == 0 ? 0 : y / zero").sigma[0]).toBe(0);
  });
});

describe("conditions choose samples", () => {
  it.each<[string, number[]]>([
    ['Group == "A"', [1, 1, 0, 0, 1, 0]],
    ['Group != "A"', [0, 0, 1, 1, 0, 0]],
    ["x > 1", [0, 1, 1, 0, 0, 0]],
    ["not (x > 1)", [1, 0, 0, 0, 0, 0]],
    ["x > 1 or y == 1", [0, 1, 1, 1, 1, 0]],
    ['x > 1 and Group == "A" or lab == "q"', [0, 1, 0, 1, 0, 0]],
    ["is_missing(x)", [0, 0, 0, 1, 0, 0]],
    ["is_below(x)", [0, 0, 0, 0, 1, 0]],
    ["1 < 2", [1, 1, 1, 1, 1, 0]],
    ["x > mean(x, Group)", [0, 1, 0, 0, 0, 0]],
    ["x / y >= 0.5", [1, 1, 1, 0, 0, 0]],
  ])("%s", (text, rows) => {
    expect(where(text)).toEqual(rows);
  });

  it("refuses what is none, at its place and field", () => {
    expect(errorOf(() => where("x + y"))).toMatchObject({ code: "not-a-condition", span: [0, 5] });
  });
});

describe("aggregates", () => {
  // By hand over 1, 2, 4: mean 7/3, sd √(7/3), median 2.
  const sd = Math.sqrt(7 / 3);
  it.each<[string, number, number]>([
    ["mean(x)", 7 / 3, sd / Math.sqrt(3)],
    ["median(x)", 2, (1.2533141373155 * sd) / Math.sqrt(3)],
    ["sd(x)", sd, sd / 2],
    ["se(x)", sd / Math.sqrt(3), sd / Math.sqrt(3) / 2],
    ["count(x)", 3, 0],
    ['count(Group == "A")', 3, 0],
    ["least(x)", 1, 0.1],
    ["most(x)", 4, 0.2],
    ['mean(x, "A")', 1.5, 0.5],
    // Weights 100, 100, 25: (100 + 200 + 100) / 225, internal σ 1/√225.
    ["wmean(x)", 400 / 225, 1 / 15],
  ])("%s", (text, value, sigma) => {
    const result = evaluate(text);
    expect(result.rows).toBe(1);
    expect(result.perSample).toBe(false);
    expect(result.value[0]).toBeCloseTo(value, 12);
    expect(result.sigma[0]).toBeCloseTo(sigma, 12);
  });

  it("give one value a class, with no σ for one sample", () => {
    const result = evaluate("mean(x, Group)");
    expect(result.byClass).toEqual(["A", "B"]);
    expect([...result.value]).toEqual([1.5, 4]);
    expect(result.sigma[0]).toBeCloseTo(0.5, 12);
    expect(result.sigma[1]).toBeNaN();
    expect(result.perSample).toBe(false);
  });

  it("give each sample its class's value", () => {
    const result = evaluate("x - mean(x, Group)");
    expect([...result.value].slice(0, 3)).toEqual([-0.5, 0.5, 0]);
    expect(result.perSample).toBe(true);
    expect(result.sigmaCommon[0]).toBeCloseTo(0.5, 12);
    expect(result.sigmaPerSample[0]).toBeCloseTo(0.1, 12);
  });

  it("know what they share: the ratio of means of two elements diluted together is exact", () => {
    const ratio = evaluate("mean(y) / mean(x)");
    const both = tableOf({ p: { unit: "1", basis: "mass", value: [1, 2, 4] }, q: { unit: "1", basis: "mass", value: [2, 4, 8] } });
    const diluted = evaluateExpression(scopeOf(both), "mean(q) / mean(p)", { block: "r" });
    expect(diluted.value[0]).toBeCloseTo(2, 12);
    expect(diluted.sigma[0]).toBeCloseTo(0, 7);
    expect(ratio.sigma[0]).toBeGreaterThan(0.1);
    const mp = evaluateExpression(scopeOf(both), "mean(p)", { block: "r" });
    const mq = evaluateExpression(scopeOf(both), "mean(q)", { block: "r" });
    expect(mp.correlation(mq)[0]).toBeCloseTo(1, 12);
  });

  it("keep the covariance of weighted means from the measured errors", () => {
    const shared = tableOf({ a: { unit: "1", basis: "mass", value: [1, 2], sigma: [0.1, 0.1] } });
    const wa = evaluateExpression(scopeOf(shared), "wmean(a)", { block: "r" });
    const w2 = evaluateExpression(scopeOf(shared), "wmean(2 * a)", { block: "r" });
    expect(wa.correlation(w2)[0]).toBeCloseTo(1, 12);
    expect(evaluateExpression(scopeOf(shared), "wmean(2 * a) - 2 * wmean(a)", { block: "r" }).sigma[0]).toBeCloseTo(0, 7);
  });

  it("say their number of samples, and of a weighted mean its scatter", () => {
    const notes = evaluate("wmean(x)").common[0]?.variable.notes ?? [];
    expect(notes[0]).toBe("over 3 samples");
    expect(notes[1]).toContain("MSWD");
  });

  it("of nothing are missing", () => {
    const empty = scopeOf(tableOf({ x: { unit: "1", value: [null] } }));
    expect(evaluateExpression(empty, "mean(x)", { block: "r" }).state[0]).toBe(missing);
    expect(evaluateExpression(empty, "count(x)", { block: "r" }).value[0]).toBe(0);
  });
});

describe("one composition", () => {
  it("takes oxides from elements, with partial derivatives", () => {
    const mgSi = compileOnComposition("MgO / Si", { block: "b" }, bodyLookup({}));
    expect(mgSi.species).toEqual(["Mg", "Si"]);
    expect([mgSi.unit, mgSi.basis]).toEqual(["1", "mass"]);
    const get = (element: string): number | null => (element === "Mg" ? 0.2 : element === "Si" ? 0.1 : null);
    const found = mgSi.evaluate(get);
    const factor = 40.304 / 24.305;
    expect(found.value).toBeCloseTo(2 * factor, 12);
    expect(found.partials.get("Mg")).toBeCloseTo(10 * factor, 10);
    expect(found.partials.get("Si")).toBeCloseTo(-20 * factor, 10);
  });

  it("says why there is no value", () => {
    const mgSi = compileOnComposition("norm(Mg / Si, CI)", { block: "b" }, bodyLookup({ CI: "CI_PLJ14" }));
    expect(mgSi.bodiesUsed).toEqual({ CI: "CI_PLJ14" });
    expect(mgSi.evaluate((element) => (element === "Mg" ? 0.2 : null))).toMatchObject({ value: null, why: "Si is not known here." });
    expect(mgSi.evaluate(() => 0).value).toBeNull();
    expect(mgSi.evaluate(() => 0.1).commons.length).toBe(2);
  });
});

describe("completion", () => {
  const chem = scopeOf(tableOf({ MgO: { value: [1] }, "SiO2 (raw)": { value: [1], species: "SiO2" }, Group: ["CI"] }));
  const labels = (text: string): string[] => complete(chem, text, text.length).options.map((option) => option.label);

  it("offers columns, the elements they give, bodies and functions", () => {
    expect(labels("Mg")).toEqual(["MgO", "Mg", "mgg"]);
    expect(complete(chem, "2 * Si", 6)).toMatchObject({
      from: 4,
      options: [
        { label: "SiO2 (raw)", insert: "`SiO2 (raw)`" },
        { label: "Si", detail: "wt%" },
      ],
    });
    expect(labels("no")).toEqual(["norm"]);
    expect(labels("norm(MgO, CI_P")).toEqual(["CI_PLJ14"]);
    expect(labels("norm(MgO, Mg")).toEqual([]);
  });

  it("offers the entries of a text column inside quotation marks, and nothing in comments", () => {
    expect(labels('Group == "C')).toEqual(["CI"]);
    expect(labels("a = 1 # Mg")).toEqual([]);
  });
});
