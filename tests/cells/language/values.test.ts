import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { evaluateExpression, type Evaluated } from "../../../cells/language";
import { errorOf, scopeOf, tableOf } from "./scopes";

interface Case {
  readonly id: string;
  readonly expect: Readonly<Record<string, number>>;
}

/** Worked values with their sources: tests/reference/check-values.json. */
const { cases } = JSON.parse(readFileSync("tests/reference/check-values.json", "utf8")) as { cases: readonly Case[] };

function expected(id: string, name: string): number {
  const value = cases.find((entry) => entry.id === id)?.expect[name];
  if (value === undefined) throw new Error(`no value ${name} of ${id}`);
  return value;
}

function close(actual: number | undefined, to: number, relative = 1e-12): void {
  expect(Math.abs((actual ?? Number.NaN) / to - 1)).toBeLessThan(relative);
}

const at = { block: "r" };

describe("worked values", () => {
  it("makes ratios of oxides, by mass and by atoms (check values: oxide-to-ratio)", () => {
    const scope = scopeOf(tableOf({ MgO: { value: [37.8], sigma: [0.02 * 37.8] }, SiO2: { value: [45], sigma: [0.45] } }));
    const evaluate = (text: string): Evaluated => evaluateExpression(scope, text, at);
    close(evaluate("Mg").value[0], expected("oxide-to-ratio", "Mg wt%"));
    close(evaluate("Si").value[0], expected("oxide-to-ratio", "Si wt%"));
    const byMass = evaluate("Mg / Si");
    close(byMass.value[0], expected("oxide-to-ratio", "Mg/Si by mass"));
    close(byMass.sigma[0], expected("oxide-to-ratio", "sigma"));
    expect(byMass.basis).toBe("mass");
    const byAtoms = evaluate("atoms(Mg) / atoms(Si)");
    close(byAtoms.value[0], expected("oxide-to-ratio", "Mg/Si by atoms"));
    close(byAtoms.sigma[0], expected("oxide-to-ratio", "sigma by atoms"));
    expect(byAtoms.basis).toBe("atoms");
    expect(byAtoms.unit.symbol).toBe("1");
  });

  it("keeps what two ratios share (check values: shared-denominator)", () => {
    const scope = scopeOf(tableOf({ Mg: { value: [22.8], sigma: [0.456] }, Al: { value: [2.35], sigma: [0.0705] }, Si: { value: [21], sigma: [0.21] } }));
    const mg = evaluateExpression(scope, "Mg / Si", at);
    const al = evaluateExpression(scope, "Al / Si", at);
    close(mg.value[0], expected("shared-denominator", "Mg/Si"));
    close(mg.sigma[0], expected("shared-denominator", "sigma Mg/Si"));
    close(al.value[0], expected("shared-denominator", "Al/Si"));
    close(al.sigma[0], expected("shared-denominator", "sigma Al/Si"));
    close(mg.correlation(al)[0], expected("shared-denominator", "correlation"));
    close(mg.correlation(mg)[0], 1);
  });

  it("takes iron as the table gives it (check values: iron)", () => {
    const total = scopeOf(tableOf({ Fe2O3t: { value: [12.3] } }));
    close(evaluateExpression(total, "FeOt", at).value[0], expected("iron", "FeOt of 12.3 wt% Fe2O3t"));
    const parts = scopeOf(tableOf({ FeO: { value: [8.34] }, Fe2O3: { value: [2.06] } }));
    close(evaluateExpression(parts, "FeOt", at).value[0], expected("iron", "FeOt of 8.34 wt% FeO with 2.06 wt% Fe2O3"));
    const untold = errorOf(() => evaluateExpression(scopeOf(tableOf({ FeO: { value: [8] } })), "1 + Fe / FeO", at));
    expect(untold).toMatchObject({ code: "iron-untold", span: [4, 6] });
  });

  it("turns traces into oxides (check values: trace-to-oxide)", () => {
    const scope = scopeOf(
      tableOf(
        Object.fromEntries(
          [
            ["Ti", 1205],
            ["Cr", 2625],
            ["Mn", 1045],
            ["K", 240],
          ].map(([name, value]) => [name, { unit: "µg/g", value: [Number(value)] }]),
        ),
      ),
    );
    for (const oxide of ["TiO2", "Cr2O3", "MnO", "K2O"])
      close(evaluateExpression(scope, `as_wtpct(${oxide})`, at).value[0], expected("trace-to-oxide", `${oxide} wt%`));
    close(evaluateExpression(scope, "as_wtpct(oxide(Ti))", at).value[0], expected("trace-to-oxide", "TiO2 wt%"));
    expect(evaluateExpression(scope, "TiO2", at).unit.symbol).toBe("µg/g");
  });

  it("knows forsterite by atoms and by mass (check values: forsterite)", () => {
    const scope = scopeOf(null);
    const atoms = evaluateExpression(scope, "at(atoms(Mg) / atoms(Si), forsterite)", at);
    close(atoms.value[0], expected("forsterite", "Mg/Si by atoms"));
    expect(atoms.sigma[0]).toBe(0);
    close(evaluateExpression(scope, "at(Mg / Si, forsterite)", at).value[0], expected("forsterite", "Mg/Si by mass"));
  });

  it("takes solar abundances (check values: sun-2009, Asplund et al. 2009)", () => {
    const scope = scopeOf(null);
    const atoms = evaluateExpression(scope, "at(atoms(Mg) / atoms(Si), SUN_A09)", at);
    close(atoms.value[0], expected("sun-2009", "Mg/Si by atoms"), 1e-9);
    close(atoms.sigma[0], expected("sun-2009", "sigma"), 1e-9);
    close(evaluateExpression(scope, "at(Mg / Si, SUN_A09)", at).value[0], expected("sun-2009", "Mg/Si by mass"), 1e-9);
    expect(errorOf(() => evaluateExpression(scope, "at(Mg, SUN_A09)", at)).code).toBe("dex-absolute");
    close(evaluateExpression(scope, "from_dex(dex(7.6) - dex(7.51))", at).value[0], expected("sun-2009", "Mg/Si by atoms"), 1e-9);
  });
});

describe("what is common to all samples", () => {
  const table = tableOf({
    Mg: { value: [9, 10, 11], sigma: [0.1, 0.1, 0.1] },
    Si: { value: [10, 10, 10], sigma: [0.2, 0.2, 0.2] },
    Al: { value: [1, 1.1, 0.9], sigma: [0.02, 0.02, 0.02] },
  });
  const scope = scopeOf(table);

  it("keeps a body's error apart from the samples'", () => {
    const plain = evaluateExpression(scope, "Mg / Si", at);
    const normed = evaluateExpression(scope, "norm(Mg / Si, CI)", at);
    const ci = evaluateExpression(scope, "at(Mg / Si, CI)", at);
    close(normed.value[1], (plain.value[1] ?? 0) / (ci.value[0] ?? 0));
    close((normed.sigmaPerSample[1] ?? 0) / (normed.value[1] ?? 0), (plain.sigma[1] ?? 0) / (plain.value[1] ?? 0));
    close((normed.sigmaCommon[1] ?? 0) / (normed.value[1] ?? 0), (ci.sigma[0] ?? 0) / (ci.value[0] ?? 0));
    // Palme, Lodders & Jones 2014: 4 % of Mg and 3 % of Si.
    close((ci.sigma[0] ?? 0) / (ci.value[0] ?? 0), 0.05);
    close(
      normed.sigma[1],
      Math.sqrt((normed.sigmaPerSample[1] ?? 0) * (normed.sigmaPerSample[1] ?? 0) + (normed.sigmaCommon[1] ?? 0) * (normed.sigmaCommon[1] ?? 0)),
    );
    expect(normed.basis).toBeNull();
    expect(normed.remark).toBe("normalised to CI (CI_PLJ14)");
    expect(normed.bodiesUsed).toEqual({ CI: "CI_PLJ14" });
    expect(normed.common.map(({ variable }) => variable.label)).toEqual(["Mg of CI_PLJ14", "Si of CI_PLJ14"]);
  });

  it("lets normalised points know that they share the body", () => {
    const mg = evaluateExpression(scope, "norm(Mg, CI)", at);
    const mgSi = evaluateExpression(scope, "norm(Mg / Si, CI)", at);
    expect(mg.covarianceCommon(mgSi)[0]).toBeGreaterThan(0);
  });

  it("counts a common error once in a mean", () => {
    const mean = evaluateExpression(scope, "mean(norm(Mg / Si, CI))", at);
    const ci = evaluateExpression(scope, "at(Mg / Si, CI)", at);
    const body = mean.common.filter(({ variable }) => variable.key.startsWith("body:"));
    let variance = 0;
    for (const { variable, partial } of body) variance += ((partial[0] ?? 0) * variable.sigma) ** 2;
    close(Math.sqrt(variance) / (mean.value[0] ?? 0), (ci.sigma[0] ?? 0) / (ci.value[0] ?? 0));
    expect(mean.perSample).toBe(false);
    expect(mean.rows).toBe(1);
  });

  it("says when a body gives no σ", () => {
    const normed = evaluateExpression(scope, "norm(Mg / Si, BSE)", at);
    expect(normed.lowerBound[0]).toBe(1);
    expect(normed.sigmaCommon[0]).toBeNaN();
    close(normed.sigma[0], normed.sigmaPerSample[0] ?? 0);
    const body = evaluateExpression(scope, "at(Mg / Si, BSE)", at);
    expect(body.sigma[0]).toBeNaN();
    expect(body.lowerBound[0]).toBe(0);
  });
});
