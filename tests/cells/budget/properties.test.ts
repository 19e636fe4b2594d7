import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createRandom } from "../../../cells/numeric";
import type { BudgetResult } from "../../../cells/page/results";
import { tableOf } from "../language/scopes";
import { evaluate, present } from "./budgets";

const seeded = { seed: 20260101, numRuns: 25 };
const fraction = fc.double({ min: 0.02, max: 0.3, noNaN: true });
/** Compositions with all of Mg, Si and Al that leave room for more. */
const composition = fc.record({ Mg: fraction, Si: fraction, Al: fraction });
type Composition = Readonly<Record<"Mg" | "Si" | "Al", number>>;
const elements = ["Mg", "Si", "Al"] as const;

function typed(parts: Composition): object {
  return { composition: Object.fromEntries(Object.entries(parts).map(([element, value]) => [`${element} kg/kg`, { value, sigma: 0.01 * value }])) };
}

const report = ["Mg / wtpct(100)", "Si / wtpct(100)", "Al / wtpct(100)"];

/** Mass fractions of Mg, Si, Al at the end. */
function atEnd(result: BudgetResult): number[] {
  return result.report.map((row) => present(row.end));
}

type StepKind = "add" | "remove" | "mix" | "share with metal" | "batch" | "fractional" | "aggregated";
const kinds: readonly StepKind[] = ["add", "remove", "mix", "share with metal", "batch", "fractional", "aggregated"];

function stepOf(kind: StepKind, what: Composition, amount: unknown): object {
  switch (kind) {
    case "add":
    case "remove":
    case "mix":
      return { do: kind, what: typed(what), amount };
    case "share with metal":
      return { do: kind, species: "Si", metalFraction: { value: 0.3, sigma: 0.01 }, amount };
    default:
      return { do: "extract melt", model: kind, amount, coefficients: { Mg: 5, Si: 0.8, Al: 0.05 } };
  }
}

/** A possible amount of a step: t runs from 0 to 1. */
function amountOf(kind: StepKind, start: Composition, what: Composition, t: number): number {
  if (kind === "add") return 2 * t;
  if (kind === "share with metal") return 60 * t;
  if (kind !== "remove") return 0.9 * t;
  return 0.9 * t * Math.min(1, ...elements.map((element) => start[element] / what[element]));
}

describe("what was solved for, put back", () => {
  it.each(kinds)("meets the target as a fixed amount: %s", (kind) => {
    fc.assert(
      fc.property(composition, composition, fc.double({ min: 0.05, max: 0.95, noNaN: true }), (start, what, t) => {
        const amount = amountOf(kind, start, what, t);
        const run = (by: unknown, more: object = {}): BudgetResult =>
          evaluate({ start: typed(start), steps: [stepOf(kind, what, by)], report: ["Al / Si"], ...more });
        const wanted = present(run({ value: amount, sigma: 0 }).report[0]?.end);
        fc.pre(Math.abs(wanted / (start.Al / start.Si) - 1) > 1e-6);
        const solved = run("solve", { target: { expression: "Al / Si", equals: { value: wanted, sigma: 0, basis: "mass" } } });
        expect(solved.ok).toBe(true);
        for (const root of solved.roots) {
          const again = run({ value: root, sigma: 0 });
          expect(Math.abs(present(again.report[0]?.end) / wanted - 1)).toBeLessThan(1e-10);
        }
        expect(solved.solved?.value).toBe(Math.min(...solved.roots));
        expect(solved.roots.some((root) => Math.abs(root / amount - 1) < 1e-6)).toBe(true);
        expect(solved.report[0]?.miss).toBe(0);
      }),
      seeded,
    );
  });

  it("is the same with steps before and after it", () => {
    const others = (amount: unknown): object[] => [
      stepOf("add", { Mg: 0.1, Si: 0.2, Al: 0.05 }, { value: 0.2, sigma: 0 }),
      stepOf("remove", { Mg: 0.2, Si: 0.1, Al: 0.001 }, amount),
      stepOf("mix", { Mg: 0.05, Si: 0.25, Al: 0.1 }, { value: 0.1, sigma: 0 }),
    ];
    const start = typed({ Mg: 0.22, Si: 0.2, Al: 0.02 });
    const target = { expression: "Mg / Si", equals: { value: 0.9, sigma: 0, basis: "mass" } };
    const solved = evaluate({ start, steps: others("solve"), target });
    const again = evaluate({ start, steps: others({ value: solved.solved?.value, sigma: 0 }), target });
    expect(Math.abs(present(again.report[0]?.end) / 0.9 - 1)).toBeLessThan(1e-10);
  });
});

describe("balances", () => {
  it("add then remove is where it began", () => {
    fc.assert(
      fc.property(composition, composition, fc.double({ min: 0, max: 3, noNaN: true }), (start, what, amount) => {
        const result = evaluate({
          start: typed(start),
          steps: [stepOf("add", what, { value: amount, sigma: 0 }), stepOf("remove", what, { value: amount, sigma: 0 })],
          report,
        });
        atEnd(result).forEach((value, i) => expect(Math.abs(value / start[elements[i] ?? "Mg"] - 1)).toBeLessThan(1e-12));
        expect(Math.abs(present(result.closure?.end) - 1)).toBeLessThan(1e-12);
      }),
      seeded,
    );
  });

  it.each(kinds)("keeps every element: kept and left are what there was and what was taken in: %s", (kind) => {
    fc.assert(
      fc.property(composition, composition, fc.double({ min: 0.05, max: 0.95, noNaN: true }), (start, what, t) => {
        const amount = amountOf(kind, start, what, t);
        const result = evaluate({ start: typed(start), steps: [stepOf(kind, what, { value: amount, sigma: 0 })], report });
        const closure = result.closure ?? { start: Number.NaN, end: Number.NaN, error: Number.NaN };
        expect(Math.abs(closure.error)).toBeLessThan(1e-14 * Math.max(1, closure.end));
        const takenIn = kind === "add" ? amount : kind === "mix" ? amount / (1 - amount) : 0;
        const gone = takenIn > 0 ? 0 : present(result.left?.mass);
        expect(Math.abs(closure.end + gone - 1 - takenIn)).toBeLessThan(1e-12);
        atEnd(result).forEach((end, i) => {
          const element = elements[i] ?? "Mg";
          const part = result.balance?.find(({ of }) => of === element);
          if (kind === "share with metal") {
            // The whole is the silicate and its metal.
            const metal = element === "Si" ? amount / 100 : 0;
            expect(Math.abs(end / (0.7 * start[element] + 0.3 * metal) - 1)).toBeLessThan(1e-12);
            expect(Math.abs(present(part?.left) - (0.3 * metal) / end)).toBeLessThan(1e-12);
            return;
          }
          const there = start[element] + takenIn * what[element];
          const kept = closure.end * end;
          const left = takenIn > 0 ? 0 : gone * present(result.left?.composition[element]);
          if (kind === "fractional") expect(kept).toBeLessThan(there);
          else expect(Math.abs((kept + left) / there - 1)).toBeLessThan(1e-11);
          // What was collected of fractional melting is not its last melt, and the balance counts what was collected.
          expect(Math.abs(present(part?.kept) - kept / there)).toBeLessThan(1e-11);
          expect(Math.abs(present(part?.kept) + present(part?.left) - 1)).toBeLessThan(1e-14);
        });
      }),
      seeded,
    );
  });

  it("closes over a sequence of everything that is not metal", () => {
    const steps = (["add", "remove", "batch", "mix", "fractional"] as const).map((kind) =>
      stepOf(kind, { Mg: 0.1, Si: 0.1, Al: 0.01 }, { value: 0.1, sigma: 0 }),
    );
    const result = evaluate({ start: typed({ Mg: 0.22, Si: 0.2, Al: 0.02 }), steps, report });
    expect(Math.abs(present(result.closure?.error))).toBeLessThan(1e-14);
    for (const part of result.balance ?? []) expect(part.kept + part.left).toBeCloseTo(1, 14);
  });

  it("mixes on a hyperbola in two ratios: A x + B x y + C y + D = 0 (Langmuir et al. 1978, eq. 1)", () => {
    fc.assert(
      fc.property(composition, composition, (start, what) => {
        const result = evaluate({ start: typed(start), steps: [stepOf("mix", what, { from: 0, to: 1 })], report: ["Mg / Si", "Mg / Al"] });
        const rows = [0, 20, 60, 100].map((i) => {
          const [x = Number.NaN, y = Number.NaN] = result.path[i]?.values.map(present) ?? [];
          return [x, x * y, y, 1];
        });
        const scale = rows.reduce((product, row) => product * Math.hypot(...row), 1);
        expect(Math.abs(determinant(rows)) / scale).toBeLessThan(1e-13);
      }),
      seeded,
    );
  });
});

function determinant(rows: readonly (readonly number[])[]): number {
  const [first = [], ...others] = rows;
  if (others.length === 0) return first[0] ?? Number.NaN;
  return first.reduce((sum, value, i) => sum + (i % 2 === 0 ? 1 : -1) * value * determinant(others.map((row) => row.filter((_, j) => j !== i))), 0);
}

describe("1σ of the solved amount", () => {
  const given = { Mg: [0.22, 0.004], Si: [0.21, 0.002], f: [0.3, 0.01], target: [0.9, 0.02] } as const;
  type Inputs = Readonly<Record<keyof typeof given, number>>;
  const budget = ({ Mg, Si, f, target }: Inputs): object => ({
    start: {
      composition: { "Mg kg/kg": { value: Mg, sigma: given.Mg[1] }, "Si kg/kg": { value: Si, sigma: given.Si[1] }, "Al kg/kg": { value: 0.02, sigma: 0.001 } },
    },
    steps: [{ do: "share with metal", species: "Si", metalFraction: { value: f, sigma: given.f[1] }, amount: "solve" }],
    target: { expression: "Mg / Si", equals: { value: target, sigma: given.target[1], basis: "mass" } },
    report: ["Mg / Si", "Al / Si"],
  });
  const inputs: Inputs = { Mg: given.Mg[0], Si: given.Si[0], f: given.f[0], target: given.target[0] };
  const names = Object.keys(given) as (keyof typeof given)[];

  it("is that of central differences of every input", () => {
    let variance = 0;
    for (const name of names) {
      const h = inputs[name] * 1e-5;
      const at = (by: number): number => present(evaluate(budget({ ...inputs, [name]: inputs[name] + by })).solved?.value);
      const slope = (at(h) - at(-h)) / (2 * h);
      variance += (slope * given[name][1]) ** 2;
    }
    const { solved, shares } = evaluate(budget(inputs));
    expect(solved?.sigmaIs).toBeUndefined();
    expect(Math.abs(present(solved?.sigma) / Math.sqrt(variance) - 1)).toBeLessThan(1e-7);
    expect(shares.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12);
    expect(shares.map(({ share }) => share)).toEqual(shares.map(({ share }) => share).sort((a, b) => b - a));
    expect(shares[0]?.input).toBe("target");
  });

  it("is that of a seeded simulation with small σ, and so is that of a ratio reported beside it", () => {
    const random = createRandom(7);
    const small = 0.2;
    const [amounts, ratios]: [number[], number[]] = [[], []];
    for (let i = 0; i < 40_000; i++) {
      const [mg, si, f, target, al] = [
        given.Mg[0] + small * given.Mg[1] * random.normal(),
        given.Si[0] + small * given.Si[1] * random.normal(),
        given.f[0] + small * given.f[1] * random.normal(),
        given.target[0] + small * given.target[1] * random.normal(),
        0.02 + small * 0.001 * random.normal(),
      ];
      // The balance by hand, and Al/Si of the whole that it leads to: Mg and Al are in the silicate alone.
      amounts.push((100 * (1 - f) * (mg / target - si)) / f);
      ratios.push((al / mg) * target);
    }
    const result = evaluate(budget(inputs));
    // 40 000 draws know a σ to 1/√80 000 = 0.35 %.
    expect(Math.abs(deviation(amounts) / small / present(result.solved?.sigma) - 1)).toBeLessThan(0.015);
    expect(Math.abs(deviation(ratios) / small / present(result.report[1]?.sigma) - 1)).toBeLessThan(0.015);
  });

  it("is smaller where start and target share a body: its error cancels", () => {
    const shared = evaluate({
      start: { body: "CI_PLJ14" },
      steps: [{ do: "add", what: { element: "Si" }, amount: "solve" }],
      target: { expression: "norm(Mg / Si, CI_PLJ14)", equals: { value: 0.9, sigma: 0, basis: "mass" } },
    });
    // Si′ = Si/0.9: the amount depends on Si of CI alone, and not on Mg at all.
    const si = 0.107;
    expect(present(shared.solved?.value)).toBeCloseTo(si / 0.9 - si, 14);
    expect(present(shared.solved?.sigma)).toBeCloseTo(0.00321 * (1 / 0.9 - 1), 12);
    expect(shared.shares.map(({ input }) => input)).toEqual(["Si of CI_PLJ14"]);
  });

  it("keeps the covariance of a class mean: elements diluted together leave their ratio exact", () => {
    const dilution = [1, 0.9, 1.1, 0.8];
    const table = tableOf({ Mg: { value: dilution.map((k) => 15 * k) }, Si: { value: dilution.map((k) => 17 * k) }, Group: ["CV", "CV", "CV", "CV"] });
    const result = evaluate(
      { start: { data: "ch", class: "CV" }, steps: [{ do: "add", what: { element: "Si" }, amount: { value: 0, sigma: 0 } }], report: ["Mg / Si", "Mg"] },
      { tables: [table] },
    );
    expect(present(result.report[0]?.start)).toBeCloseTo(15 / 17, 14);
    expect(present(result.report[0]?.startSigma)).toBeLessThan(1e-8);
    // Standard error s/√n by hand: dilutions have variance 0.05/3.
    expect(present(result.report[1]?.startSigma)).toBeCloseTo((15 * Math.sqrt(0.05 / 3)) / 2, 12);
  });
});

function deviation(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
}
