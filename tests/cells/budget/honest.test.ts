import { describe, expect, it } from "vitest";
import { verdictOf } from "../../../app/_blocks/budget/budgetWords";
import { formsOf } from "../../../cells/budget";
import { tableOf } from "../language/scopes";
import { blockOf, evaluate, present } from "./budgets";

const siliconInMetal = {
  start: { body: "BSE" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
  target: { expression: "Mg / Si", equals: { body: "CI" } },
  report: ["Mg / Si", "Al / Si"],
};

describe("what makes a scientist reject a tool like this", () => {
  it("never presents one mechanism as sufficient when a second ratio rules it out: the report shows the miss in σ", () => {
    const result = evaluate(siliconInMetal);
    const [solvedFor, second] = result.report;
    expect(solvedFor?.miss).toBe(0);
    // (end − target)/σ, by hand: both hold T = Mg/Si of CI and Al, Si of CI. End Al/Si = (Al/Mg)BSE × T; BSE has no σ.
    const [al, mg, si] = [0.0084, 0.0954, 0.107];
    const bse = 0.0235 / 0.228;
    const difference = (bse * mg - al) / si;
    const byMg = (bse / si) * 0.003816;
    const byAl = (1 / si) * 0.000504;
    const bySi = (difference / si) * 0.00321;
    expect(second?.miss).toBeCloseTo(difference / Math.sqrt(byMg * byMg + byAl * byAl + bySi * bySi), 9);
    expect(present(second?.miss)).toBeGreaterThan(2);
    const verdict = verdictOf(blockOf(siliconInMetal), result);
    expect(`${verdict?.before}${verdict?.against}${verdict?.after}`).toContain("One mechanism is not enough.");
  });

  it("counts the error of CI that start, step and target share once: the miss is not that of independent errors", () => {
    const result = evaluate({
      start: { body: "CI_PLJ14" },
      steps: [{ do: "add", what: { element: "Si" }, amount: { value: 0.01, sigma: 0 } }],
      target: { expression: "Mg / Si", equals: { body: "CI_PLJ14" } },
      report: ["Mg / Si", "Al / Mg"],
    });
    const [row, same] = result.report;
    const independent = (present(row?.end) - present(row?.target)) / Math.hypot(present(row?.sigma), present(row?.targetSigma));
    expect(Math.abs(present(row?.miss))).toBeGreaterThan(10 * Math.abs(independent));
    expect(same?.miss).toBe(0);
  });

  it("never takes an unknown σ for 0", () => {
    const unknown = evaluate({ ...siliconInMetal, target: { expression: "Mg / Si", equals: { body: "CI_MS95" } } });
    expect(unknown.solved).toMatchObject({ sigma: null });
    expect(unknown.solved?.sigmaIs).toBeUndefined();
    expect(unknown.report[1]).toMatchObject({ startSigma: null, sigma: null, targetSigma: null, miss: null });
    expect(unknown.shares).toEqual([]);
    const partly = evaluate(siliconInMetal);
    expect(partly.solved?.sigmaIs).toBe("lower bound");
    // Each compilation says so for itself, and a miss over such a σ says that it is the most.
    expect(partly.byCompilation.map(({ sigma, sigmaIs }) => (sigma === null ? "unknown" : (sigmaIs ?? "known")))).toEqual([
      ...["unknown", "lower bound", "lower bound", "unknown"],
      ...["lower bound", "known", "known", "lower bound"],
    ]);
    expect(partly.report[1]?.note).toBe("The σ of an input is unknown, so it misses by this many σ at most.");
    expect(partly.problems.map(({ text }) => text)).toContain("The σ of Mg of BSE_MS95, Si of BSE_MS95 is unknown, so that of the amount is a lower bound.");
  });

  it("gives no σ of start or target that is a lower bound without saying so", () => {
    const start = { composition: { "Mg wt%": { value: 20, sigma: 0.4 }, "Si wt%": 16 } };
    const result = evaluate({ start, steps: [], report: ["Mg / Si", "Mg"] });
    expect(result.report[0]).toMatchObject({ startSigma: null, sigma: 1.25 * 0.02, sigmaIs: "lower bound" });
    expect(result.report[1]?.startSigma).toBeCloseTo(0.4, 14);
  });

  it("takes a typed number without σ for one of unknown σ, and one of σ 0 for exact", () => {
    const run = (amount: object): ReturnType<typeof evaluate> =>
      evaluate({ start: { phase: "enstatite" }, steps: [{ do: "add", what: { phase: "forsterite" }, amount }], report: ["Mg / Si"] });
    expect(run({ value: 0.1 }).report[0]).toMatchObject({ startSigma: 0, sigma: null });
    expect(run({ value: 0.1, sigma: 0 }).report[0]).toMatchObject({ sigma: 0 });
    expect(present(run({ value: 0.1, sigma: 0.01 }).report[0]?.sigma)).toBeGreaterThan(0);
  });

  it("never takes an element without coefficient for D = 0", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [{ do: "extract melt", model: "batch", amount: { value: 0.1 }, coefficients: { La: 0.01 } }],
      report: ["La", "Sm", "Mg / Si"],
    });
    expect(present(result.report[0]?.end)).toBeGreaterThan(0);
    expect(result.report[1]).toMatchObject({
      end: null,
      sigma: null,
      note: expect.stringContaining("The melt takes Sm along, and nothing says how much") as unknown,
    });
    expect(result.report[2]?.end).toBeNull();
    expect(present(result.report[2]?.start)).toBeGreaterThan(1);
    expect(Object.keys(result.left?.composition ?? {})).toEqual(["La"]);
    expect(result.balance?.map(({ of }) => of)).toEqual(["mass", "La"]);
  });

  it("takes nothing for 0 that a composition does not say", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [{ do: "add", what: { composition: { "SiO2 wt%": 60 } }, amount: { value: 0.1 } }],
      report: ["Mg / Si"],
    });
    expect(result.report[0]).toMatchObject({ end: null, note: expect.stringContaining("says nothing of Mg") as unknown });
  });

  it("says which basis each ratio has", () => {
    const result = evaluate({ ...siliconInMetal, report: ["Mg / Si", "atoms(Mg) / atoms(Si)", "norm(Mg / Si, CI)"] });
    expect(result.report.map(({ basis }) => basis)).toEqual(["mass", "atoms", null]);
    expect(present(result.report[2]?.end)).toBeCloseTo(1, 12);
    // The same balance, aimed at by atoms, has the same answer.
    const byAtoms = evaluate({ ...siliconInMetal, target: { expression: "atoms(Mg) / atoms(Si)", equals: { body: "CI" } } });
    expect(present(byAtoms.solved?.value)).toBeCloseTo(present(result.solved?.value), 10);
  });

  it("names every compilation it used", () => {
    expect(evaluate(siliconInMetal).bodiesUsed).toEqual({ BSE: "BSE_MS95", CI: "CI_PLJ14" });
    const rest = evaluate({
      ...siliconInMetal,
      steps: [{ ...siliconInMetal.steps[0], rest: { body: "CORE_M01" } }],
      report: ["norm(Mg / Si, CI_MS95)"],
    });
    expect(rest.bodiesUsed).toEqual({ BSE: "BSE_MS95", CI: "CI_PLJ14", CORE_M01: "CORE_M01", CI_MS95: "CI_MS95" });
  });

  it("says how many samples of a class it used, and leaves out those that lack an element it needs", () => {
    const table = tableOf({ Mg: { value: [14, 15, 16, 30] }, Si: { value: [15, 16, 17, null] }, Group: ["CV", "CV", "CV", "CV"] });
    const result = evaluate({ start: { data: "ch", class: "CV" }, steps: [], report: ["Mg / Si"] }, { tables: [table] });
    expect(present(result.report[0]?.start)).toBeCloseTo(15 / 16, 12);
    expect(result.problems).toEqual([
      expect.objectContaining({ severity: "note", text: "The mean of CV in ch is that of 3 of its 4 samples: the others lack one of Mg, Si." }),
    ]);
  });

  it("has no standard error of one sample", () => {
    const table = tableOf({ Mg: { value: [14] }, Si: { value: [15] }, Group: ["CV"] });
    const result = evaluate({ start: { data: "ch", class: "CV" }, steps: [], report: ["Mg / Si"] }, { tables: [table] });
    expect(result.report[0]?.startSigma).toBeNull();
  });

  it("keeps the correlation of the errors of a sample's columns, and takes iron as its table says", () => {
    const rho = 0.8;
    const table = tableOf(
      { Mg: { value: [20], sigma: [0.4] }, Si: { value: [16], sigma: [0.32] }, FeOt: { value: [10], sigma: [0.1] } },
      { correlations: [{ of: ["Mg", "Si"], value: Float64Array.of(rho) }] },
    );
    const result = evaluate({ start: { data: "ch", sample: "S1" }, steps: [], report: ["Mg / Si", "FeO", "Al"] }, { tables: [table] });
    expect(present(result.report[0]?.startSigma)).toBeCloseTo(1.25 * 0.02 * Math.sqrt(2 - 2 * rho), 12);
    expect(present(result.report[1]?.start)).toBeCloseTo(10, 12);
    expect(result.report[2]).toMatchObject({ start: null, note: "ch gives no Al." });
    const untold = tableOf({ Mg: { value: [20] }, FeO: { value: [8] } });
    const asked = evaluate({ start: { data: "ch", row: 1 }, steps: [], report: ["Fe / Mg"] }, { tables: [untold] });
    expect(asked.report[0]?.start).toBeNull();
    expect(asked.report[0]?.note).toContain("FeO");
  });

  it("gives below detection no number", () => {
    const table = tableOf({ Mg: { value: [20] }, Si: { value: ["<"] } });
    const result = evaluate({ start: { data: "ch", sample: "S1" }, steps: [], report: ["Mg / Si"] }, { tables: [table] });
    expect(result.report[0]).toMatchObject({ start: null, note: "Si of S1 of ch is below detection." });
  });

  it("warns where the path turns within 1σ of the answer", () => {
    // Mg·Si of the mixture has its most at x = 1/3, 5.0625 %²: a target just below lies at a turning point.
    const result = evaluate({
      start: { composition: { "Mg wt%": { value: 30, sigma: 0.3 }, "Si wt%": { value: 10, sigma: 0.1 } } },
      steps: [{ do: "mix", what: { composition: { "Mg wt%": { value: 10, sigma: 0.1 }, "Si wt%": { value: 40, sigma: 0.4 } } }, amount: "solve" }],
      target: { expression: "Mg / wtpct(1) * (Si / wtpct(1))", equals: { value: 504, sigma: 0, basis: "mass" } },
    });
    expect(result.roots.length).toBeGreaterThan(0);
    expect(result.problems).toContainEqual(expect.objectContaining({ code: "turning-point", severity: "warning" }));
  });

  it("lets a trace see how its numbers depend on their inputs, and keeps that out of JSON", () => {
    const result = evaluate(siliconInMetal);
    const forms = formsOf(result);
    expect(forms?.solved?.value).toBe(result.solved?.value);
    expect(forms?.report).toHaveLength(2);
    expect(JSON.parse(JSON.stringify(result))).not.toHaveProperty("forms");
    expect(structuredClone(result)).toEqual(JSON.parse(JSON.stringify(result)));
  });
});
