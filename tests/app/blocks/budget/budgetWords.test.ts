import { describe, expect, it } from "vitest";
import { phraseText, stateInWords, stepPhrase, targetPhrase, verdictOf } from "@/app/_blocks/budget/budgetWords";
import { splitExpressions } from "@/app/_blocks/budget/BudgetSteps";
import { readComposition, writeComposition } from "@/app/_blocks/budget/compositionText";
import { missScale } from "@/app/_blocks/budget/ReportTable";
import { balanceOf } from "@/app/_blocks/budget/BudgetBars";
import type { BudgetBlock, BudgetReport, BudgetResult } from "@/cells";

const bodies = { CI: "CI_PLJ14", BSE: "BSE_MS95" };
const block: BudgetBlock = {
  id: "b",
  kind: "budget",
  start: { body: "BSE" },
  steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
  target: { expression: "Mg/Si", equals: { body: "CI" } },
  report: ["Mg / Si", "Al / Si"],
};

const report = (expression: string, miss: number | null): BudgetReport => ({
  expression,
  basis: "mass",
  unit: "1",
  start: 1,
  startSigma: 0.1,
  end: 1,
  sigma: 0.1,
  target: 1,
  targetSigma: 0.1,
  miss,
});

function result(change: Partial<BudgetResult> = {}): BudgetResult {
  return {
    kind: "budget",
    ok: true,
    solved: { value: 9.6, sigma: 0.9, unit: "wt%", of: "Si in the metal" },
    roots: [9.6],
    report: [report("Mg / Si", 0), report("Al / Si", 3.4)],
    path: [],
    shares: [],
    byCompilation: [],
    problems: [],
    bodiesUsed: {},
    ...change,
  };
}

describe("a budget in words", () => {
  it("says its steps and its target with the compilations they mean", () => {
    const [step] = block.steps;
    if (step === undefined || block.target === undefined) throw new Error("expected a step and a target");
    expect(phraseText(stepPhrase(step, bodies, "concise"))).toBe("share Si with metal, 32.3 % of the whole, amount solved");
    expect(phraseText(targetPhrase(block.target, bodies, "by mass", "concise"))).toBe("so that Mg/Si equals CI_PLJ14, by mass");
    expect(phraseText(stepPhrase({ do: "add", what: { phase: "forsterite" }, amount: { from: 0, to: 0.25 } }, bodies, "concise"))).toBe(
      "add forsterite, from 0 to 0.25\u2009kg/kg of the start",
    );
  });

  it("never presents one mechanism as enough when a second ratio rules it out", () => {
    expect(verdictOf(block, result())).toEqual({
      before: "Silicon in the metal brings Mg/Si to CI but leaves ",
      against: "Al/Si 3.4σ too high",
      after: ". One mechanism is not enough.",
    });
    expect(stateInWords(result())).toEqual({ text: "Al/Si rules it out alone", problem: true });
  });

  it("claims no more than that nothing reported speaks against it", () => {
    const verdict = verdictOf(block, result({ report: [report("Mg / Si", 0), report("Al / Si", -0.4)] }));
    expect(verdict?.against).toBe("");
    expect(verdict?.after).toContain("Nothing reported here");
  });

  it("has no verdict where nothing can be compared", () => {
    expect(verdictOf(block, result({ report: [report("Mg / Si", 0), report("Al / Si", null)] }))).toBeNull();
    expect(verdictOf(block, result({ ok: false }))).toBeNull();
  });

  it("widens the scale of misses to the worst one", () => {
    expect(missScale([report("a", 3.4)])).toBe(4.5);
    expect(missScale([report("a", -9)])).toBe(10.5);
    expect(missScale([report("a", 500)])).toBe(30);
  });

  it("draws the mass alone where the engine says no more", () => {
    expect(balanceOf(result({ left: { what: "metal", mass: 0.25, composition: {} }, closure: { start: 1, end: 0.75, error: 0 } }))).toEqual([
      { of: "mass", kept: 0.75, left: 0.25 },
    ]);
  });
});

describe("what is typed into a budget", () => {
  it("parts expressions at commas outside brackets", () => {
    expect(splitExpressions("norm(Na / Si, CI), Mg / Si,")).toEqual(["norm(Na / Si, CI)", "Mg / Si"]);
  });

  it("reads a composition as it writes it", () => {
    const composition = { "SiO2 wt%": { value: 45, sigma: 0.4 }, "MgO wt%": 37.8, "La µg/g": { value: 0.648, sigma: 0.065 } };
    expect(readComposition(writeComposition(composition))).toEqual({ composition });
  });

  it("asks how much there is of a species", () => {
    expect(readComposition("SiO2")).toMatchObject({ problem: expect.stringContaining("SiO2") as string });
  });
});
