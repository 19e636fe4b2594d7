import { describe, expect, it } from "vitest";
import { evaluateExpression, type Evaluated } from "../../../cells/language";
import { errorOf, scopeOf, tableOf } from "./scopes";

const table = tableOf({
  MgO: { value: [37.8], sigma: [0.4] },
  SiO2: { value: [45], sigma: [0.4] },
  La: { unit: "µg/g", value: [0.6] },
  Ti: { unit: "at%", species: "Ti", value: [0.1] },
  T: { unit: "°C", value: [1200], sigma: [5] },
  T2: { unit: "K", value: [1400], sigma: [5] },
  P: { unit: "kbar", value: [15] },
  r_mass: { unit: "1", basis: "mass", value: [1.1] },
  r_atoms: { unit: "1", basis: "atoms", value: [1.2] },
  r_unsaid: { unit: "1", value: [1.3] },
  d: { unit: "ε", value: [2] },
  Group: ["CI"],
});
const scope = scopeOf(table, { mg_si: "Mg / Si", broken: "Mg +", loop: "loop + 1", a1: "a2 * 2", a2: "Mg / Si" });
const evaluate = (text: string): Evaluated => evaluateExpression(scope, text, { block: "r" });
const refused = (text: string): ReturnType<typeof errorOf> => errorOf(() => evaluate(text));

describe("units and bases of results", () => {
  it.each<[string, string, string | null]>([
    ["Mg", "wt%", "mass"],
    ["La", "µg/g", "mass"],
    ["La + Mg", "µg/g", "mass"],
    ["as_ugg(Mg)", "µg/g", "mass"],
    ["Mg / Si", "1", "mass"],
    ["Mg / La", "1", "mass"],
    ["atoms(Mg) / atoms(Si)", "1", "atoms"],
    ["atoms(Mg)", "mol/kg", "atoms"],
    ["mol(SiO2)", "mol/kg", "formula units"],
    ["mol(SiO2) / mol(MgO)", "1", "formula units"],
    ["norm(Mg / Si, CI)", "1", null],
    ["log10(Mg / Si)", "1", "mass"],
    ["sqrt(Mg * Si)", "wt%", "mass"],
    ["Mg * Si", "(kg/kg)²", "mass"],
    ["T", "°C", null],
    ["T - T2", "K", null],
    ["T2 - T", "K", null],
    ["P", "kbar", null],
    ["2 * r_mass", "1", "mass"],
    ["to_dex(atoms(Mg) / atoms(Si))", "dex", "atoms"],
    ["d", "ε", null],
    ["count(Mg)", "1", null],
    ["oxide(Mg)", "wt%", "mass"],
  ])("%s is in %s, by %s", (text, unit, basis) => {
    const result = evaluate(text);
    expect([result.unit.symbol, result.basis]).toEqual([unit, basis]);
  });

  it("keeps temperatures and their differences apart", () => {
    expect(evaluate("T").value[0]).toBeCloseTo(1200, 9);
    expect(evaluate("T2 - T").value[0]).toBeCloseTo(1400 - 1473.15, 9);
    expect(evaluate("T + kelvin(10) - kelvin(0)").sigma[0]).toBeCloseTo(5, 9);
    expect(evaluate("mean(T)").value[0]).toBeCloseTo(1200, 9);
    expect(evaluate("celsius(20)").value[0]).toBeCloseTo(20, 9);
  });

  it("says what a number without basis is", () => {
    expect(evaluate("log10(Mg / Si)").remark).toBe("logarithm");
    expect(evaluate("mean(Mg / Si)").remark).toBe("mean of ratios");
    expect(evaluate("mean(Mg) / mean(Si)").remark).toBe("ratio of means");
    expect(evaluate("norm(Mg, CI_PLJ14)").remark).toBe("normalised to CI_PLJ14");
  });
});

describe("errors of unit and basis explain themselves, at the operator", () => {
  it("of mass against atoms", () => {
    const error = refused("Mg / Si - atoms(Mg) / atoms(Si)");
    expect([error.code, error.span]).toEqual(["basis-mismatch", [8, 9]]);
    expect(error.text).toBe(
      "Mg / Si is a ratio by mass, atoms(Mg) / atoms(Si) a ratio by atoms; they cannot be subtracted from one another. The two differ: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass. By atoms, Mg / Si is atoms(Mg) / atoms(Si); or write both by mass.",
    );
  });

  it("of plain numbers", () => {
    expect(refused("Mg + 20").text).toBe("Mg is a mass fraction, 20 a plain number; they cannot be added. Say what 20 is: wtpct(20) or ugg(20).");
    expect(evaluate("Mg + wtpct(20)").value[0]).toBeCloseTo(22.794983128225482 + 20, 9);
    expect(refused("T > 1000 ? 1 : 0").text).toContain("celsius(1000)");
  });

  it.each<[string, string, readonly [number, number]]>([
    ["Mg + T", "unit-mismatch", [3, 4]],
    ["Mg > T", "unit-mismatch", [3, 4]],
    ["Mg + atoms(Mg)", "unit-mismatch", [3, 4]],
    ["atoms(Mg) + mol(SiO2)", "basis-mismatch", [10, 11]],
    ["r_mass + r_atoms", "basis-mismatch", [7, 8]],
    ["r_mass == r_unsaid", "basis-mismatch", [7, 9]],
    ["norm(Mg / Si, CI) + Mg / Si", "basis-mismatch", [18, 19]],
    ["1 > 2 ? Mg : T", "unit-mismatch", [6, 7]],
    ["min(Mg, T)", "unit-mismatch", [0, 3]],
    ["log10(Mg)", "unit-mismatch", [6, 8]],
    ["exp(T)", "unit-mismatch", [4, 5]],
    ["Mg ^ (Mg / Si)", "unit-mismatch", [3, 4]],
    ["2 ^ Mg", "unit-mismatch", [4, 6]],
    ["wtpct(Mg)", "unit-mismatch", [6, 8]],
    ["wtpct(Mg / Si)", "unit-mismatch", [6, 13]],
    ["as_wtpct(T)", "unit-mismatch", [9, 10]],
    ["as_wtpct(Mg / Si)", "unit-mismatch", [9, 16]],
    ["from_dex(Mg)", "unit-mismatch", [9, 11]],
    ["atoms(SiO2)", "not-an-element", [6, 10]],
    ["atoms(Mg + Si)", "not-a-species", [6, 13]],
    ["atoms(mg_si)", "not-a-species", [6, 11]],
    ["mol(T)", "not-a-species", [4, 5]],
    ["Mg > wtpct(1)  * 2 + Mg > Mg", "chained-comparison", [24, 25]],
    ["(Mg > Si) * 2", "not-a-number", [1, 8]],
    ["Mg and Si", "not-a-condition", [3, 6]],
    ["not Mg", "not-a-condition", [0, 3]],
    ["Mg ? 1 : 2", "not-a-condition", [0, 2]],
    ["Group + 1", "not-a-number", [0, 5]],
    ["Group > 'CI'", "text-mismatch", [6, 7]],
    ["Group == 1", "text-mismatch", [6, 8]],
    ["'a' == 'b'", "text-mismatch", [4, 6]],
    ["'a'", "not-a-number", [0, 3]],
    ["Zz / Si", "unknown-name", [0, 2]],
    ["x.y", "unknown-name", [0, 3]],
    ["sin(Mg)", "unknown-function", [0, 3]],
    ["log(Mg / Si)", "unknown-function", [0, 3]],
    ["norm(Mg)", "wrong-arguments", [0, 8]],
    ["norm(Mg, XX)", "unknown-body", [9, 11]],
    ["norm(Mg, 1)", "not-a-body", [9, 10]],
    ["norm(Tm, CORE_M01)", "unknown-name", [5, 7]],
    ["norm(T / T2, CI)", "not-a-species", [5, 6]],
    ["norm(Mg / Al, forsterite)", "unknown-name", [10, 12]],
    ["at(Mg / Al, forsterite)", "not-on-body", [3, 10]],
    ["at(mean(Mg), CI)", "not-on-body", [3, 11]],
    ["mean(3)", "not-per-sample", [5, 6]],
    ["mean(Mg, 'XX')", "unknown-class", [9, 13]],
    ["mean(Mg, Si)", "not-a-class", [9, 11]],
    ["broken * 2", "bad-line", [0, 6]],
    ["2 * loop", "cycle", [4, 8]],
  ])("%s: %s", (text, code, span) => {
    const error = refused(text);
    expect([error.code, error.span, error.text.endsWith(".")]).toEqual([code, span, true]);
  });

  it("moves places to the field an expression stands in", () => {
    const error = errorOf(() => evaluateExpression(scope, "Mg + T", { block: "r", offset: 10 }));
    expect(error.span).toEqual([13, 14]);
  });
});

describe("names", () => {
  it("takes lines as the expressions they are, across lines and by block", () => {
    const direct = evaluate("Mg / Si * 2");
    for (const text of ["mg_si * 2", "r.mg_si * 2", "a1"]) {
      const result = evaluate(text);
      expect(result.value[0]).toBe(direct.value[0]);
      expect(result.sigma[0]).toBe(direct.sigma[0]);
      expect(result.correlation(direct)[0]).toBeCloseTo(1, 12);
    }
    expect(evaluate("a1").lines.map((line) => line.name)).toEqual(["a2", "a1"]);
  });

  it("gives lines on bodies too", () => {
    expect(evaluate("norm(mg_si, CI)").value[0]).toBe(evaluate("norm(Mg / Si, CI)").value[0]);
  });

  it("refuses a name that means two things", () => {
    const two = scopeOf(table, { Mg: "2", P: "3" }, { other: "ambiguous" });
    const code = (text: string): string => errorOf(() => evaluateExpression(two, text, { block: "r" })).code;
    expect([code("Mg"), code("P"), code("other")]).toEqual(["ambiguous-name", "ambiguous-name", "ambiguous-name"]);
  });

  it("reaches columns of other tables through aggregates only", () => {
    const other = tableOf({ MgO: { value: [30, 32] } }, { handle: "rocks" });
    const both = scopeOf(table, {}, { "rocks.Mg": { kind: "column", table: other, name: "Mg" } });
    expect(errorOf(() => evaluateExpression(both, "Mg - rocks.Mg", { block: "r" }))).toMatchObject({ code: "table-mismatch", span: [3, 4] });
    expect(evaluateExpression(both, "Mg / mean(rocks.Mg)", { block: "r" }).value[0]).toBeCloseTo(37.8 / 31, 12);
    expect(evaluateExpression(both, "rocks.Mg", { block: "r" }).rows).toBe(2);
  });

  it("names the conversion", () => {
    expect(evaluate("Mg / Si").conversions).toEqual(["Mg = MgO × 0.603042", "Si = SiO2 × 0.467437"]);
  });
});
