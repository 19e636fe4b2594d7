import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { elementMassFraction, parseChemical } from "../../../cells/species";
import { evaluate, present } from "./budgets";

interface Case {
  readonly id: string;
  readonly given: Readonly<Record<string, number>>;
  readonly expect: Readonly<Record<string, number>>;
  readonly tolerance?: number;
}

/** Worked values with their sources: tests/reference/check-values.json. */
const { cases } = JSON.parse(readFileSync("tests/reference/check-values.json", "utf8")) as { cases: readonly Case[] };

function close(actual: number | null | undefined, to: number, relative = 1e-12): void {
  expect(Math.abs(present(actual) / to - 1)).toBeLessThan(relative);
}

const inMetal = (amount: unknown): object => ({ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount });

describe("melting (Shaw 1970, check values: melting)", () => {
  const melting = cases.find(({ id }) => id === "melting");
  if (melting === undefined) throw new Error("no check values for melting");
  const { D = Number.NaN, F = Number.NaN } = melting.given;
  const run = (model: string): { melt: number; residue: number } => {
    const result = evaluate({
      start: { composition: { "La µg/g": 1 } },
      steps: [{ do: "extract melt", model, amount: { value: F, sigma: 0 }, coefficients: { La: D } }],
      report: ["La"],
    });
    return { melt: present(result.left?.composition.La) * 1e6, residue: present(result.report[0]?.end) / present(result.report[0]?.start) };
  };
  const expected = (name: string): number => present(melting.expect[name]);
  // The file gives ten digits.
  const tolerance = melting.tolerance ?? 1e-9;

  it("gives batch melt and residue", () => {
    close(run("batch").melt, expected("batch melt"), tolerance);
    close(run("batch").residue, expected("batch residue"), tolerance);
  });

  it("gives the last melt of fractional melting, the melt collected, and one residue for both", () => {
    close(run("fractional").melt, expected("fractional melt, instantaneous"), tolerance);
    close(run("aggregated").melt, expected("fractional melt, aggregated"), tolerance);
    close(run("fractional").residue, expected("fractional residue"), tolerance);
    close(run("aggregated").residue, expected("fractional residue"), tolerance);
  });

  it("takes phases that melt in other proportions than they stand in (P ≠ D), after the formulas written out here", () => {
    const [d, p, f] = [0.2, 0.5, 0.1];
    const base = 1 - (p * f) / d;
    const run = (model: string): { melt: number; residue: number } => {
      const steps = [{ do: "extract melt", model, amount: { value: f }, coefficients: { La: d }, meltCoefficients: { La: p } }];
      const result = evaluate({ start: { composition: { "La µg/g": 1 } }, steps, report: ["La"] });
      return { melt: present(result.left?.composition.La) * 1e6, residue: present(result.report[0]?.end) * 1e4 };
    };
    close(run("batch").melt, 1 / (d + f * (1 - p)));
    close(run("batch").residue, (1 - f / (d + f * (1 - p))) / (1 - f));
    close(run("fractional").melt, (1 / d) * base ** (1 / p - 1));
    close(run("aggregated").melt, (1 - base ** (1 / p)) / f);
    close(run("aggregated").residue, base ** (1 / p) / (1 - f));
  });

  it("melts phases that hold none of the element (P = 0) as the limit does", () => {
    const steps = [{ do: "extract melt", model: "aggregated", amount: { value: 0.1 }, coefficients: { La: 0.2 }, meltCoefficients: { La: 0 } }];
    const result = evaluate({ start: { composition: { "La µg/g": 1 } }, steps, report: ["La"] });
    close(present(result.report[0]?.end) * 1e4, Math.exp(-0.1 / 0.2) / 0.9);
  });

  it("takes major elements from the composition of the melt", () => {
    const steps = [{ do: "extract melt", model: "batch", amount: { value: 0.1 }, coefficients: {}, melt: { composition: { "MgO wt%": 10, "SiO2 wt%": 50 } } }];
    const result = evaluate({ start: { composition: { "MgO wt%": 38, "SiO2 wt%": 45 } }, steps, report: ["MgO", "SiO2"] });
    close(result.report[0]?.end, (38 - 0.1 * 10) / 0.9);
    close(result.report[1]?.end, (45 - 0.1 * 50) / 0.9);
    expect(result.left?.what).toBe("melt");
    close(result.left?.mass, 0.1);
  });
});

describe("silicon shared with metal", () => {
  const budget = { start: { body: "BSE_MS95" }, steps: [inMetal("solve")], target: { expression: "Mg / Si", equals: { body: "CI" } } };
  const [mg, si, f] = [0.228, 0.21, 0.323];

  it("comes to between 7.7 and 9.6 wt% by the choice of the CI compilation alone, and says each", () => {
    // s = (1 − f)(Mg/T − Si)/f by hand, T by the compilation: McDonough & Sun 1995, Palme et al. 2014, Lodders et al. 2009, Wasson & Kallemeyn 1988.
    const ratios: Readonly<Record<string, number>> = { CI_MS95: 96500 / 106500, CI_PLJ14: 95400 / 107000, CI_LPG09: 95800 / 107000, CI_WK88: 9.7 / 10.5 };
    const result = evaluate(budget);
    const fromMs95 = result.byCompilation.filter(({ bodies }) => bodies.BSE_MS95 === "BSE_MS95");
    expect(fromMs95.map(({ bodies }) => bodies.CI)).toEqual(Object.keys(ratios));
    for (const { bodies, solved } of fromMs95) close(solved, (100 * (1 - f) * (mg / present(ratios[bodies.CI ?? ""]) - si)) / f);
    const solved = fromMs95.map((row) => present(row.solved));
    expect(Math.min(...solved).toFixed(1)).toBe("7.7");
    expect(Math.max(...solved).toFixed(1)).toBe("9.6");
  });

  it("is reported for every pair of compilations once, the page's own among them", () => {
    const result = evaluate(budget);
    expect(result.byCompilation).toHaveLength(8);
    expect(new Set(result.byCompilation.map(({ bodies }) => JSON.stringify(bodies))).size).toBe(8);
    const own = result.byCompilation.find(({ bodies }) => bodies.BSE_MS95 === "BSE_MS95" && bodies.CI === "CI_PLJ14");
    expect(own?.solved).toBe(result.solved?.value);
    expect(result.bodiesUsed).toEqual({ BSE_MS95: "BSE_MS95", CI: "CI_PLJ14" });
  });

  it("says the metal's mass and composition, per kg of the whole, and where the elements lie", () => {
    const result = evaluate({ ...budget, report: ["Mg / Si", "Al / Si"] });
    const solved = present(result.solved?.value);
    expect(result.solved).toMatchObject({ unit: "wt%", of: "Si in the metal" });
    expect(result.left).toMatchObject({ what: "metal", mass: 0.323 });
    close(result.left?.composition.Si, solved / 100);
    const silicon = result.balance?.find((part) => part.of === "Si");
    close(silicon?.left, (f * solved) / 100 / ((f * solved) / 100 + (1 - f) * si));
    expect(silicon?.moved).toBe(silicon?.left);
    expect(result.balance?.find((part) => part.of === "Mg")).toEqual({ of: "Mg", kept: 1, left: 0 });
    close(result.balance?.find((part) => part.of === "mass")?.moved, (f * solved) / 100);
  });

  it("reaches a CI that is given as solar abundances too, as a ratio", () => {
    const result = evaluate({ ...budget, target: { expression: "Mg / Si", equals: { body: "SUN_A09" } } });
    // Mg/Si by mass of the Sun (check values: sun-2009).
    const sun = present(cases.find(({ id }) => id === "sun-2009")?.expect["Mg/Si by mass"]);
    close(result.solved?.value, (100 * (1 - f) * (mg / sun - si)) / f, 1e-9);
  });

  it("shares two species, each with the amount, and fills the rest of the metal as it is told", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [
        {
          do: "share with metal",
          species: ["Si", "S"],
          metalFraction: { value: 0.323, sigma: 0 },
          amount: { value: 5, sigma: 0 },
          rest: { body: "CORE_M01" },
        },
      ],
      report: ["as_wtpct(Si)", "as_wtpct(Fe)", "as_wtpct(Al)"],
    });
    expect(result.problems.some(({ severity, text }) => severity === "note" && text.includes("each of Si, S"))).toBe(true);
    close(result.report[0]?.end, 0.677 * 21 + 0.323 * 5);
    // The rest of the metal is CORE_M01 without its 6.0 wt% Si and 1.9 wt% S, scaled to 90 wt%; 85 wt% of the core are Fe.
    const iron = (85 * 0.9) / (1 - 0.079);
    close(result.left?.composition.Fe, iron / 100);
    close(result.report[1]?.end, 0.677 * 6.26 + 0.323 * iron);
    close(result.report[2]?.end, 0.677 * 2.35);
    const fractions = result.left?.composition ?? {};
    expect(fractions.Si).toBe(0.05);
    expect(fractions.S).toBe(0.05);
  });
});

describe("adding, removing, mixing", () => {
  const forsterite = parseChemical("Mg2SiO4");
  if (forsterite === undefined) throw new Error("no forsterite");
  const [mgOf, siOf] = [elementMassFraction(forsterite, "Mg"), elementMassFraction(forsterite, "Si")];

  it("solves for forsterite removed as the balance by hand does", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [{ do: "remove", what: { phase: "forsterite" }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { body: "CI" } },
    });
    const target = 95400 / 107000;
    close(result.solved?.value, (0.228 - target * 0.21) / (mgOf - target * siOf));
    expect(result.left?.what).toBe("forsterite");
    close(result.left?.mass, present(result.solved?.value));
    close(result.left?.composition.Mg, mgOf);
    close(result.closure?.end, 1 - present(result.solved?.value));
  });

  it("solves for an element added", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [{ do: "add", what: { element: "Si" }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { value: 0.9, sigma: 0.01, basis: "mass" } },
    });
    close(result.solved?.value, 0.228 / 0.9 - 0.21);
    expect(result.solved).toMatchObject({ unit: "kg/kg", of: "Si added" });
    expect(result.left?.what).toBe("Si, taken in");
  });

  it("mixes by the mass fraction of the mixture, over the whole range from one to the other", () => {
    const mixture = { start: { composition: { "Mg wt%": 20, "Si wt%": 20, "Al wt%": 1 } }, report: ["Mg / Si", "Al / Si"] };
    const what = { composition: { "Mg wt%": 5, "Si wt%": 40, "Al wt%": 8 } };
    const result = evaluate({ ...mixture, steps: [{ do: "mix", what, amount: { from: 0, to: 1 } }] });
    expect(result.path).toHaveLength(101);
    const quarter = result.path[25];
    expect(quarter?.amount).toBe(0.25);
    close(quarter?.values[0], (0.75 * 20 + 0.25 * 5) / (0.75 * 20 + 0.25 * 40));
    close(result.path[100]?.values[0], 5 / 40);
  });

  it("lists every amount that reaches the target and takes the smallest", () => {
    // Mg·Si of the mixture is a parabola in x: (0.3 − 0.2x)(0.1 + 0.3x) is 0.0385 twice.
    const result = evaluate({
      start: { composition: { "Mg wt%": 30, "Si wt%": 10 } },
      steps: [{ do: "mix", what: { composition: { "Mg wt%": 10, "Si wt%": 40 } }, amount: "solve" }],
      target: { expression: "Mg / wtpct(1) * (Si / wtpct(1))", equals: { value: 490, basis: "mass" } },
    });
    const root = (sign: number): number => (7 + sign * Math.sqrt(49 - 4 * 6 * (4.9 - 3))) / 12;
    expect(result.roots).toHaveLength(2);
    close(result.roots[0], root(-1));
    close(result.roots[1], root(1));
    expect(result.solved?.value).toBe(result.roots[0]);
  });

  it("takes a typed composition that sums to 100 wt% for all there is, with the oxygen of its oxides", () => {
    const result = evaluate({
      start: { body: "BSE" },
      steps: [{ do: "add", what: { composition: { "SiO2 wt%": 60, "MgO wt%": 40 } }, amount: { value: 0.5, sigma: 0 } }],
      report: ["as_wtpct(Al)", "as_wtpct(Si)"],
    });
    close(result.report[0]?.end, 2.35 / 1.5);
    close(result.report[1]?.end, (21 + 0.5 * 60 * 0.467434) / 1.5, 1e-5);
  });
});
