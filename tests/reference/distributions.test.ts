import { expect, it } from "vitest";
import {
  chiSquareQuantile,
  chiSquareSurvival,
  erf,
  erfc,
  incompleteBeta,
  incompleteGamma,
  logGamma,
  normalCdf,
  normalQuantile,
  studentTwoSided,
  studentTwoSidedQuantile,
} from "@/cells/numeric";
import { Nearness, recorded } from "./recorded";

interface Case {
  readonly function: string;
  readonly of: readonly number[];
  readonly value: number;
}

/** Each function and how near it comes to mpmath at 50 digits, relative. */
const functions: Readonly<Record<string, readonly [work: (...of: number[]) => number, tolerance: number]>> = {
  erf: [(x = NaN) => erf(x), 1e-15],
  erfc: [(x = NaN) => erfc(x), 5e-15],
  logGamma: [(x = NaN) => logGamma(x), 1e-13],
  gammaP: [(a = NaN, x = NaN) => incompleteGamma(a, x)[0], 1e-12],
  gammaQ: [(a = NaN, x = NaN) => incompleteGamma(a, x)[1], 1e-12],
  incompleteBeta: [(a = NaN, b = NaN, x = NaN) => incompleteBeta(a, b, x), 1e-12],
  normalCdf: [(z = NaN) => normalCdf(z), 1e-14],
  normalQuantile: [(p = NaN) => normalQuantile(p), 1e-13],
  // Γ(a + b)/Γ(a) of thousands of degrees is a difference of logarithms near 2e4: 1e-10 there, 1e-13 below a hundred.
  studentTwoSided: [(t = NaN, k = NaN) => studentTwoSided(t, k), 2e-10],
  studentTwoSidedQuantile: [(inside = NaN, k = NaN) => studentTwoSidedQuantile(inside, k), 1e-11],
  chiSquareSurvival: [(x = NaN, k = NaN) => chiSquareSurvival(x, k), 1e-12],
  chiSquareQuantile: [(p = NaN, k = NaN) => chiSquareQuantile(p, k), 1e-12],
};

it("distribution functions are those of mpmath (scripts/reference/distributions.py)", () => {
  const near = new Nearness();
  const cases = recorded<Case>("distributions");
  for (const { function: name, of, value } of cases) {
    const [work, tolerance] = functions[name] ?? [() => NaN, 0];
    near.relative(name, `${name}(${of.join(", ")})`, work(...of), value, tolerance);
  }
  expect(new Set(cases.map((each) => each.function))).toEqual(new Set(Object.keys(functions)));
  near.hold();
});
