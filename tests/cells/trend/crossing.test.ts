import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";

import { createRandom } from "../../../cells/numeric";
import { crossingRegionOf, evaluateTrend, fitOf } from "../../../cells/trend";
import { crossing, crossingCovariance } from "../../../cells/trend/crossing";
import { distanceFromLine, distanceOfPoints } from "../../../cells/trend/distance";
import { combine, covariance, variance, type LinearForm } from "../../../cells/trend/linearForm";
import { york } from "../../../cells/trend/york";
import type { CommonVariable } from "../../../cells/language";
import type { TrendResult } from "../../../cells/page/results";
import type { Table } from "../../../cells/table/table";
import { tableOf } from "../language/scopes";
import { codes, contextOf, pointsTable, trend, type Points } from "./pages";

interface GivenLine {
  readonly intercept: number;
  readonly slope: number;
  readonly "sigma intercept": number;
  readonly "sigma slope": number;
  readonly covariance: number;
}

/** A line that stands alone: its slope and intercept know of each other. */
function lineForms(name: string, given: GivenLine): { slope: LinearForm; intercept: LinearForm } {
  const variable = (key: string, value: number, sigma: number): CommonVariable => ({
    key: `${name}:${key}`,
    label: key,
    value,
    sigma,
    covarianceWith: (other) => (other.key.startsWith(`${name}:`) ? given.covariance : 0),
  });
  return {
    slope: { value: given.slope, terms: [{ variable: variable("slope", given.slope, given["sigma slope"]), partial: 1 }] },
    intercept: { value: given.intercept, terms: [{ variable: variable("intercept", given.intercept, given["sigma intercept"]), partial: 1 }] },
  };
}

const free = (key: string, value: number, sigma: number): LinearForm => ({ value, terms: [{ variable: { key, label: key, value, sigma }, partial: 1 }] });

/** Two trends over one table, the first crossed with the second. */
function crossed(table: Table, first: Parameters<typeof trend>[0], second: Parameters<typeof trend>[0]): { result: TrendResult; other: TrendResult } {
  const other = evaluateTrend(trend({ ...second, id: "t2" }), contextOf(table));
  return { result: evaluateTrend(trend({ ...first, crossWith: "t2" }), contextOf(table, { others: [other] })), other };
}

describe("the crossing of two lines", () => {
  it("has the reference's place, σ and correlation to 12 digits (delta method with both full covariances)", () => {
    const file = JSON.parse(readFileSync(new URL("../../reference/check-values.json", import.meta.url), "utf8")) as {
      cases: { id: string; given: Record<string, GivenLine>; expect: Record<string, number> }[];
    };
    const found = file.cases.find((each) => each.id === "crossing");
    const [one, two] = [found?.given["line 1"], found?.given["line 2"]];
    if (found === undefined || one === undefined || two === undefined) throw new Error("the case crossing is not in the reference file");
    const point = crossing(lineForms("1", one), lineForms("2", two));
    const [sx, sy] = [Math.sqrt(variance(point.x)), Math.sqrt(variance(point.y))];
    for (const [got, name] of [
      [point.x.value, "x"],
      [sx, "sigma x"],
      [point.y.value, "y"],
      [sy, "sigma y"],
      [crossingCovariance(point) / (sx * sy), "correlation"],
    ] as const) {
      const expected = found.expect[name] ?? NaN;
      expect(Math.abs(got - expected), `${name}: got ${got}, expected ${expected}`).toBeLessThanOrEqual(1e-12 * Math.abs(expected));
    }
  });

  it("knows that a body's error that moves both lines alike moves the crossing with them", () => {
    // Both intercepts hang on one shared error of 0.5: the crossing's x does not move, its y moves by all of it.
    const shared: CommonVariable = { key: "shared", label: "shared", value: 0, sigma: 0.5 };
    const line = (slope: number): { slope: LinearForm; intercept: LinearForm } => ({
      slope: { value: slope, terms: [] },
      intercept: { value: 1, terms: [{ variable: shared, partial: 1 }] },
    });
    const point = crossing(line(1), line(-1));
    expect(variance(point.x)).toBe(0);
    expect(Math.sqrt(variance(point.y))).toBeCloseTo(0.5, 14);
  });
});

describe("distances", () => {
  it("in two dimensions, 2σ is p = exp(−2): 86 % lies nearer (χ² of two degrees of freedom)", () => {
    const a = { x: free("ax", 2, 1), y: free("ay", 0, 1) };
    const b = { x: { value: 0, terms: [] }, y: { value: 0, terms: [] } };
    const found = distanceOfPoints(a, b);
    expect(found?.distance).toBeCloseTo(2, 14);
    expect(found?.p).toBeCloseTo(0.1353352832366127, 13);
    expect(found?.upperBound).toBe(false);
  });

  it("takes both covariances and what they share", () => {
    const shared = free("s", 0, 3);
    const a = { x: { value: 1, terms: [...shared.terms, ...free("ax", 0, 1).terms] }, y: free("ay", 0, 1) };
    const b = { x: shared, y: free("by", 0, 1) };
    // The shared 3 cancels: x differs by 1 ± 1, y by 0 ± √2.
    expect(distanceOfPoints(a, b)?.distance).toBeCloseTo(1, 14);
  });

  it("from a line: residual over the σ of point and line together, two-sided normal p", () => {
    const line = { slope: { value: 2, terms: [] }, intercept: free("a", 1, 0.3) };
    const found = distanceFromLine({ x: free("x", 1, 0.2), y: free("y", 4, 0.5) }, line);
    // y − a − bx = 1; σ² = 0.5² + (2 · 0.2)² + 0.3² = 0.5.
    expect(found?.distance).toBeCloseTo(1 / Math.sqrt(0.5), 14);
    expect(found?.p).toBeCloseTo(0.15729920705028513, 12);
  });

  it("an unknown σ makes the distance an upper bound and is not taken as 0 in silence", () => {
    const a = { x: free("ax", 2, NaN), y: free("ay", 0, 1) };
    const b = { x: free("bx", 0, 1), y: free("by", 0, 1) };
    expect(distanceOfPoints(a, b)?.upperBound).toBe(true);
  });
});

const spread = [0, 0.25, 0.5, 0.75, 1, 1.25];

/** Two groups along two lines, with σ of a size that decides how well their slopes are told apart. */
function twoGroups(b1: number, b2: number, sigma: number): Points {
  const wobble = [0.3, -0.5, 0.2, 0.4, -0.6, 0.2];
  return {
    x: [...spread, ...spread],
    y: [...spread.map((x, i) => 1 + b1 * x + (wobble[i] ?? 0) * sigma), ...spread.map((x, i) => 0.5 + b2 * x - (wobble[i] ?? 0) * sigma)],
    sigmaX: [...spread, ...spread].map(() => 0),
    sigmaY: [...spread, ...spread].map(() => sigma),
    group: [...spread.map(() => "A"), ...spread.map(() => "B")],
  };
}
const A = { where: 'Group == "A"' };
const B = { where: 'Group == "B"' };

describe("crossed trends", () => {
  it("far apart in slope: an ellipse, whose σ are those of the delta method", () => {
    const { result, other } = crossed(pointsTable(twoGroups(-1, 1, 0.05)), A, B);
    const [one, two] = [fitOf(result), fitOf(other)];
    if (one === undefined || two === undefined || result.crossing === undefined) throw new Error("no crossing");
    expect(result.crossing.region).toBe("ellipse");
    expect(result.crossing.with).toBe("t2");
    const point = crossing(one.line, two.line);
    expect(result.crossing.x).toEqual({ value: point.x.value, sigma: Math.sqrt(variance(point.x)) });
    expect(result.crossing.covariance).toBe(crossingCovariance(point));
    // No samples shared: the slopes are independent, σ(b)² = σ² / Σ(x − mean)².
    const own = 0.05 / Math.sqrt(spread.reduce((sum, x) => sum + (x - 0.625) ** 2, 0));
    expect(point.separation).toBeCloseTo(Math.abs(one.line.slope.value - two.line.slope.value) / (own * Math.sqrt(2)), 9);
    // The curve is the 95 % ellipse: each of its points has Mahalanobis distance √5.991 from the crossing.
    const region = crossingRegionOf(result);
    const [vx, vy, c] = [variance(point.x), variance(point.y), crossingCovariance(point)];
    expect(region?.x.length).toBe(64);
    region?.x.forEach((x, i) => {
      const [u, v] = [x - point.x.value, (region.y[i] ?? NaN) - point.y.value];
      expect((u * u * vy - 2 * u * v * c + v * v * vx) / (vx * vy - c * c)).toBeCloseTo(5.991464547107979, 8);
    });
  });

  it("slopes less than 6σ apart: a simulated region, the same each time, and said so", () => {
    const table = pointsTable(twoGroups(-0.35, 0.35, 0.15));
    const { result, other } = crossed(table, A, B);
    const [one, two] = [fitOf(result), fitOf(other)];
    if (one === undefined || two === undefined || result.crossing === undefined) throw new Error("no crossing");
    const { separation, x } = crossing(one.line, two.line);
    expect(separation).toBeGreaterThan(3);
    expect(separation).toBeLessThan(6);
    expect(result.crossing.region).toBe("simulated");
    expect(codes(result)).toContain("crossing-simulated");
    // Wider than first order says, by not more than half: the ratio of two normal numbers has long tails.
    expect(result.crossing.x.sigma).toBeGreaterThan(Math.sqrt(variance(x)));
    expect(result.crossing.x.sigma).toBeLessThan(1.5 * Math.sqrt(variance(x)));
    const again = crossed(table, A, B).result;
    expect(again.crossing).toEqual(result.crossing);
    expect(crossingRegionOf(again)).toEqual(crossingRegionOf(result));
    // Of other draws, 95 % lie in the region's x range or a little more of them (a seeded draw of 20,000; ±1 %).
    const region = crossingRegionOf(result);
    const random = createRandom(77);
    let inside = 0;
    const [va, vb] = [one.source.covariance, two.source.covariance];
    const draw = (line: typeof one.line, v: typeof va): [a: number, b: number] => {
      const b = Math.sqrt(v.slopeVariance) * random.normal();
      const a = (v.covariance / v.slopeVariance) * b + Math.sqrt(v.interceptVariance - (v.covariance * v.covariance) / v.slopeVariance) * random.normal();
      return [line.intercept.value + a, line.slope.value + b];
    };
    for (let k = 0; k < 20_000; k++) {
      const [a1, b1] = draw(one.line, va);
      const [a2, b2] = draw(two.line, vb);
      const at = (a2 - a1) / (b1 - b2);
      if (within(region ?? { x: [], y: [] }, at, a1 + b1 * at)) inside++;
    }
    expect(inside / 20_000).toBeGreaterThan(0.94);
    expect(inside / 20_000).toBeLessThan(0.96);
  });

  it("slopes less than 3σ apart: refused, with both slopes and what to do; the line itself stands", () => {
    const { result } = crossed(pointsTable(twoGroups(-0.1, 0.1, 0.15)), A, B);
    expect(result.ok).toBe(true);
    expect(result.crossing).toBeUndefined();
    const problem = result.problems.find((each) => each.code === "crossing-not-known");
    expect(problem).toMatchObject({ severity: "error", field: "crossWith", block: "t" });
    expect(problem?.text).toMatch(/slopes of t \(.+\) and t2 \(.+\) differ by .+σ; below 3σ it is not known where the lines cross\. Use more samples/u);
  });

  it("with itself, or with a trend that has no line: refused in words", () => {
    const table = pointsTable(twoGroups(-1, 1, 0.05));
    const own = evaluateTrend(trend(A), contextOf(table));
    expect(codes(evaluateTrend(trend({ ...A, crossWith: "t" }), contextOf(table, { others: [own] })))).toContain("crossed-with-itself");
    const none = evaluateTrend(trend({ id: "t2", where: "X > 100" }), contextOf(table));
    const context = contextOf(table);
    const result = evaluateTrend(trend({ ...A, crossWith: "t2" }), { ...context, result: (handle) => (handle === "t2" ? none : context.result(handle)) });
    expect(result.problems.find((each) => each.code === "no-line")?.text).toContain("t2 has no line");
  });

  it("over other quantities: refused for another basis or unit, warned of for another expression", () => {
    const table = tableOf({
      Mg: { value: [10, 12, 14, 16, 18], sigma: [0.1, 0.1, 0.1, 0.1, 0.1] },
      Si: { value: [20, 19, 18, 17, 15], sigma: [0.1, 0.1, 0.1, 0.1, 0.1] },
      Al: { value: [1, 1.3, 1.5, 1.9, 2.2], sigma: [0.02, 0.02, 0.02, 0.02, 0.02] },
    });
    const code = (x: string, y: string): string[] => codes(crossed(table, { x: "Mg / Si", y: "Al / Si" }, { x, y }).result);
    expect(code("atoms(Mg) / atoms(Si)", "Al / Si")).toContain("basis-mismatch");
    expect(code("Mg", "Al / Si")).toContain("unit-mismatch");
    expect(code("Al / Mg", "Mg / Si")).toContain("different-axes");
  });

  it("in another unit of the same quantity: the crossing is where it was", () => {
    const table = tableOf({
      Mg: { value: [10, 12, 14, 16, 18, 10, 12, 14, 16, 18], sigma: new Array<number>(10).fill(0.05) },
      Al: { value: [1, 1.21, 1.4, 1.61, 1.8, 2, 1.71, 1.4, 1.11, 0.8], sigma: new Array<number>(10).fill(0.01) },
      Group: ["A", "A", "A", "A", "A", "B", "B", "B", "B", "B"],
    });
    const plain = crossed(table, { x: "Mg", y: "Al", ...A }, { x: "Mg", y: "Al", ...B }).result.crossing;
    const other = crossed(table, { x: "Mg", y: "Al", ...A }, { x: "as_ugg(Mg)", y: "as_ugg(Al)", ...B }).result.crossing;
    if (plain === undefined || other === undefined) throw new Error("no crossing");
    expect(other.x.value).toBeCloseTo(plain.x.value, 9);
    expect(other.x.sigma).toBeCloseTo(plain.x.sigma ?? NaN, 9);
    expect(other.y.value).toBeCloseTo(plain.y.value, 9);
    expect(other.covariance).toBeCloseTo(plain.covariance, 12);
  });
});

/** True where (x, y) lies inside a closed curve: rays to the right meet it an odd number of times. */
function within(curve: { x: ArrayLike<number>; y: ArrayLike<number> }, x: number, y: number): boolean {
  let inside = false;
  for (let i = 0, j = curve.x.length - 1; i < curve.x.length; j = i++) {
    const [xi, yi, xj, yj] = [curve.x[i] ?? NaN, curve.y[i] ?? NaN, curve.x[j] ?? NaN, curve.y[j] ?? NaN];
    if (yi > y !== yj > y && x < ((xj - xi) * (y - yi)) / (yj - yi) + xi) inside = !inside;
  }
  return inside;
}

describe("trends that share samples", () => {
  // Four samples at the crossing belong to both trends, three more to each alone, all exactly on their lines. Invented.
  const Si = [20, 20.4, 20.7, 21, 20, 20.5, 20.8, 20.2, 20.6, 21];
  const ratio = [1, 1, 1, 1, 0.75, 0.8, 0.85, 1.15, 1.2, 1.26];
  const Mg = Si.map((si, i) => si * (ratio[i] ?? NaN));
  const Al = Si.map((si, i) => si * (0.1 + (i < 7 ? 0.14 : -0.12) * ((ratio[i] ?? NaN) - 1)));
  const Group = ["both", "both", "both", "both", "A", "A", "A", "B", "B", "B"];
  const relative = { Mg: 0.004, Al: 0.025, Si: 0.004 };
  const table = tableOf({
    Mg: { value: Mg, sigma: Mg.map((v) => v * relative.Mg) },
    Al: { value: Al, sigma: Al.map((v) => v * relative.Al) },
    Si: { value: Si, sigma: Si.map((v) => v * relative.Si) },
    Group,
  });
  const axes = { x: "Mg / Si", y: "Al / Si" } as const;

  it("have a covariance that a simulation of the measurements finds too (6,000 draws, 6 % of each σ, 10 % of the covariance)", () => {
    const { result, other } = crossed(table, { ...axes, where: 'Group != "B"', scatter: "none" }, { ...axes, where: 'Group != "A"', scatter: "none" });
    const { crossing: found } = result;
    const [one, two] = [fitOf(result), fitOf(other)];
    if (found === undefined || one === undefined || two === undefined) throw new Error("no crossing");
    expect(found.region).toBe("ellipse");

    const fitOn = (points: TrendResult["points"], x: number[], y: number[]): { slope: number; intercept: number } => {
      const pick = (values: number[]): Float64Array => Float64Array.from(points, (p) => values[p.index] ?? NaN);
      return york({
        x: pick(x),
        y: pick(y),
        sigmaX: Float64Array.from(points, (p) => p.sigmaX),
        sigmaY: Float64Array.from(points, (p) => p.sigmaY),
        correlation: Float64Array.from(points, (p) => p.correlation),
      });
    };
    const random = createRandom(5);
    const draws = 6000;
    const xs: number[] = [];
    const ys: number[] = [];
    const heights1: number[] = [];
    const heights2: number[] = [];
    for (let k = 0; k < draws; k++) {
      const si = Si.map((v) => v * (1 + relative.Si * random.normal()));
      const x = Mg.map((v, i) => (v * (1 + relative.Mg * random.normal())) / (si[i] ?? NaN));
      const y = Al.map((v, i) => (v * (1 + relative.Al * random.normal())) / (si[i] ?? NaN));
      const a = fitOn(result.points, x, y);
      const b = fitOn(other.points, x, y);
      const at = (b.intercept - a.intercept) / (a.slope - b.slope);
      xs.push(at);
      ys.push(a.intercept + a.slope * at);
      heights1.push(a.intercept + a.slope);
      heights2.push(b.intercept + b.slope);
    }
    const sd = (values: number[]): number => {
      const mean = values.reduce((sum, v) => sum + v, 0) / values.length;
      return Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (values.length - 1));
    };
    expect(Math.abs((found.x.sigma ?? NaN) / sd(xs) - 1)).toBeLessThan(0.06);
    expect(Math.abs((found.y.sigma ?? NaN) / sd(ys) - 1)).toBeLessThan(0.06);

    // The heights of both lines at the shared samples move together; without sharing their covariance would be 0.
    const height = (line: typeof one.line): LinearForm =>
      combine(line.intercept.value + line.slope.value, [
        [line.intercept, 1],
        [line.slope, 1],
      ]);
    const expected = covariance(height(one.line), height(two.line));
    const mean = (values: number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length;
    const [m1, m2] = [mean(heights1), mean(heights2)];
    const simulated = heights1.reduce((sum, h, k) => sum + (h - m1) * ((heights2[k] ?? NaN) - m2), 0) / (draws - 1);
    expect(Math.abs(expected / simulated - 1), `${expected} against ${simulated}`).toBeLessThan(0.1);
    expect(expected).toBeGreaterThan(0.5 * Math.sqrt(variance(height(one.line)) * variance(height(two.line))));
    expect(covariance(height(one.line), height(alone(two.line)))).toBe(0);
  });

  it("fitted by least squares share the scatter of those samples; with a York fit it is known from the errors of the samples", () => {
    const ols = { ...axes, method: "ordinary least squares" } as const;
    const both = crossed(table, { ...ols, where: 'Group != "B"' }, { ...ols, where: 'Group != "A"' });
    expect(codes(both.result)).not.toContain("shared-samples");
    const mixed = crossed(table, { ...ols, where: 'Group != "B"' }, { ...axes, where: 'Group != "A"' });
    expect(codes(mixed.result)).not.toContain("shared-samples");
  });
});

/** The same line over variables that know nothing of others but each other. */
function alone({ slope, intercept }: { readonly slope: LinearForm; readonly intercept: LinearForm }): { slope: LinearForm; intercept: LinearForm } {
  const originals = new Map<string, CommonVariable>(
    [slope, intercept].flatMap((form) => form.terms.map(({ variable }) => [`alone:${variable.key}`, variable] as const)),
  );
  const bare = (form: LinearForm): LinearForm => ({
    value: form.value,
    terms: form.terms.map(({ variable, partial }) => ({
      partial,
      variable: {
        key: `alone:${variable.key}`,
        label: variable.label,
        value: variable.value,
        sigma: variable.sigma,
        covarianceWith: (other: CommonVariable) => {
          const original = originals.get(other.key);
          return original === undefined ? 0 : (variable.covarianceWith?.(original) ?? 0);
        },
      },
    })),
  });
  return { slope: bare(slope), intercept: bare(intercept) };
}
