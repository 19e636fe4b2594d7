import { describe, expect, it } from "vitest";
import type { BudgetResult } from "@/cells";
import { evaluate, resultOf } from "../cells/page/pages";
import { Nearness, recorded } from "./recorded";

interface Melting {
  readonly id: string;
  readonly given: { readonly D: number; readonly F: number; readonly P?: number };
  readonly batch: { readonly melt: number; readonly residue: number };
  readonly fractional: { readonly "last melt": number; readonly collected: number; readonly residue: number };
}

type Composition = Readonly<Record<"Mg" | "Si" | "Al", number>>;

interface Mixing {
  readonly id: string;
  readonly given: { readonly one: Composition; readonly two: Composition; readonly share: number };
  readonly mixture: Readonly<Record<"Mg/Si" | "Al/Si" | "Al/Mg", number>>;
  /** A, B, C, D of A x + B xy + C y + D = 0 for x = Mg/Si, y = Al/Mg. */
  readonly hyperbola: readonly [number, number, number, number];
}

const all = recorded<Melting | Mixing>("melting");
const meltings = all.filter((each): each is Melting => "batch" in each);
const mixings = all.filter((each): each is Mixing => "mixture" in each);

function budget(fields: object): BudgetResult {
  return resultOf(evaluate({ id: "b", kind: "budget", ...fields }), "b", "budget");
}

describe("melting (scripts/reference/melting.py: mass balances, not Shaw's closed forms)", () => {
  const melt = ({ given }: Melting, model: string): { melt: number; residue: number } => {
    const { D, F, P } = given;
    const result = budget({
      start: { composition: { "La µg/g": 1 } },
      steps: [
        { do: "extract melt", model, amount: { value: F, sigma: 0 }, coefficients: { La: D }, ...(P === undefined ? {} : { meltCoefficients: { La: P } }) },
      ],
      report: ["La"],
    });
    const [row] = result.report;
    return { melt: (result.left?.composition["La"] ?? Number.NaN) * 1e6, residue: (row?.end ?? Number.NaN) / (row?.start ?? Number.NaN) };
  };
  // A power of 1/D carries the last digit of its base 1/D times: 1e-12 of the smaller coefficients, 1e-13 of the larger.
  const tolerance = ({ given: { D, P } }: Melting): number => 1e-14 * Math.max(10, 4 / (P ?? D));

  it("batch: melt and residue, modal and not", () => {
    expect(meltings).toHaveLength(60);
    const near = new Nearness();
    for (const each of meltings) {
      const got = melt(each, "batch");
      near.relative("melt", each.id, got.melt, each.batch.melt, 1e-13);
      near.relative("residue", each.id, got.residue, each.batch.residue, 1e-12);
    }
    near.hold();
  });

  it("fractional and aggregated: last melt, melt collected, and one residue", () => {
    const near = new Nearness();
    for (const each of meltings) {
      const [last, collected] = [melt(each, "fractional"), melt(each, "aggregated")];
      near.relative("last melt", each.id, last.melt, each.fractional["last melt"], tolerance(each));
      near.relative("melt collected", each.id, collected.melt, each.fractional.collected, tolerance(each));
      near.relative("residue", each.id, last.residue, each.fractional.residue, tolerance(each));
      expect(collected.residue, each.id).toBe(last.residue);
    }
    near.hold();
  });

  it("loses nothing: F × melt + (1 − F) × residue is what was there", () => {
    for (const each of meltings)
      for (const model of ["batch", "aggregated"]) {
        const got = melt(each, model);
        expect(Math.abs(each.given.F * got.melt + (1 - each.given.F) * got.residue - 1), `${each.id}, ${model}`).toBeLessThan(1e-13);
      }
  });
});

describe("mixing of two components", () => {
  const composition = (of: Composition): object => ({ composition: { "Mg wt%": of.Mg, "Si wt%": of.Si, "Al wt%": of.Al } });
  const mix = ({ given: { one, two } }: Mixing, amount: object): BudgetResult =>
    budget({ start: composition(one), steps: [{ do: "mix", what: composition(two), amount }], report: ["Mg / Si", "Al / Si", "Al / Mg"] });

  it("has the ratios of the summed masses, to 1e-13", () => {
    expect(mixings).toHaveLength(40);
    const near = new Nearness();
    for (const each of mixings) {
      const { report } = mix(each, { value: each.given.share, sigma: 0 });
      (["Mg/Si", "Al/Si", "Al/Mg"] as const).forEach((ratio, i) => near.relative(ratio, each.id, report[i]?.end, each.mixture[ratio], 1e-13));
    }
    near.hold();
  });

  it("runs along Langmuir's hyperbola, A x + B xy + C y + D = 0, over the whole path", () => {
    for (const each of mixings) {
      const [a, b, c, d] = each.hyperbola;
      const { path } = mix(each, { from: 0, to: 1 });
      expect(path).toHaveLength(101);
      for (const { values } of path) {
        const [x = null, , y = null] = values;
        if (x === null || y === null) throw new Error(`${each.id}: the path has a gap`);
        const terms = [a * x, b * x * y, c * y, d];
        const sum = terms.reduce((total, term) => total + term, 0);
        expect(Math.abs(sum), each.id).toBeLessThanOrEqual(1e-12 * Math.max(...terms.map(Math.abs)));
      }
    }
  });
});
