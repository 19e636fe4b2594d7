import { describe, expect, it } from "vitest";

import { createRandom } from "../../../cells/numeric";
import { bandOf, evaluateTrend, fitOf } from "../../../cells/trend";
import { intrinsicScatter } from "../../../cells/trend/intrinsicScatter";
import type { FitPoints } from "../../../cells/trend/lineFit";
import { york } from "../../../cells/trend/york";
import type { Table } from "../../../cells/table/table";
import { tableOf } from "../language/scopes";
import { codes, contextOf, fitPoints, pointsTable, trend } from "./pages";

/** Twelve invented samples near a line, Mg 1 %, Al 2 %, Si 0.8 %. */
function twelve(): Table {
  const away = [0.4, -0.9, 1.2, -0.3, 0.1, -1.1, 0.8, 0.5, -0.6, 1, -0.7, -0.2];
  const Si = away.map((_, i) => 18 + 0.4 * i);
  const Mg = Si.map((si, i) => si * (0.8 + 0.03 * i));
  const Al = Si.map((si, i) => si * (0.04 + 0.08 * (0.8 + 0.03 * i)) * (1 + 0.015 * (away[i] ?? 0)));
  return tableOf({
    Mg: { value: Mg, sigma: Mg.map((v) => v * 0.01) },
    Al: { value: Al, sigma: Al.map((v) => v * 0.02) },
    Si: { value: Si, sigma: Si.map((v) => v * 0.008) },
    Group: away.map((_, i) => (i % 2 === 0 ? "CV" : "CO")),
  });
}

describe("an error common to all samples", () => {
  it("is counted once: normalised to one body, MSWD is that of the plain ratios, and the body's σ is added to the slope's afterwards", () => {
    const context = contextOf(twelve());
    const plain = evaluateTrend(trend({ x: "Mg / Si", y: "Al / Si" }), context);
    const normalised = evaluateTrend(trend({ x: "Mg / Si", y: "norm(Al / Si, CI)" }), context);
    expect(normalised.n).toBe(12);
    expect(normalised.mswd).toBeCloseTo(plain.mswd ?? NaN, 9);
    expect(normalised.p).toBeCloseTo(plain.p ?? NaN, 9);

    // Al/Si of CI: its relative σ from the body's own Al and Si, first order.
    const CI = context.bodies("CI");
    const relative = (species: string): number => {
      const of = CI?.values.find((value) => value.species === species);
      return of === undefined || of.canonicalSigma === null ? NaN : of.canonicalSigma / of.canonical;
    };
    const body = Math.sqrt(relative("Al") ** 2 + relative("Si") ** 2);
    expect(body).toBeGreaterThan(0.02);
    const slope = normalised.slope?.value ?? NaN;
    const own = (plain.slope?.sigma ?? NaN) / (plain.slope?.value ?? NaN);
    expect((normalised.slope?.sigma ?? NaN) / slope).toBeCloseTo(Math.sqrt(own ** 2 + body ** 2), 8);
    expect(normalised.bodiesUsed["CI"]).toBe("CI_PLJ14");
  });

  it("does not count as distance: normalised to CI, CI lies at 1 exactly, on both axes", () => {
    const result = evaluateTrend(trend({ x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" }), contextOf(twelve()));
    const CI = result.fromBodies.find((each) => each.body === "CI");
    const line = fitOf(result)?.line;
    if (line === undefined || CI === undefined) throw new Error("no line, or no distance from it");
    const band = bandOf(fitOf(result) as NonNullable<ReturnType<typeof fitOf>>, [1]);
    const sigma = ((band.upper[0] ?? NaN) - (band.lower[0] ?? NaN)) / (2 * 1.959963984540054);
    expect(CI.distance).toBeCloseTo(Math.abs(1 - line.intercept.value - line.slope.value) / sigma, 9);
  });

  it("a band is the line's own 95 %, and narrowest where the samples are", () => {
    const fit = fitOf(evaluateTrend(trend({ x: "Mg / Si", y: "Al / Si" }), contextOf(twelve())));
    if (fit === undefined) throw new Error("no line");
    const { lower, upper, x } = bandOf(fit, [0, 0.965, 2]);
    const width = Array.from(upper, (value, i) => value - (lower[i] ?? NaN));
    expect(width[1]).toBeLessThan(width[0] ?? NaN);
    expect(width[1]).toBeLessThan(width[2] ?? NaN);
    const { interceptVariance } = fit.source.covariance;
    expect(x[0]).toBe(0);
    expect(width[0]).toBeCloseTo(2 * 1.959963984540054 * Math.sqrt(interceptVariance), 12);
  });
});

// Twelve points whose scatter is five times what their errors say. Invented.
const scattered = {
  x: [0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11],
  y: [0.5, 0.7, 2.4, 2.3, 4.6, 4.7, 6.4, 6.6, 8.5, 8.3, 10.4, 10.7],
  sigmaX: new Array<number>(12).fill(0.02),
  sigmaY: new Array<number>(12).fill(0.07),
};

function pointsOf({ x, y, sigmaX, sigmaY }: typeof scattered): FitPoints {
  return {
    x: Float64Array.from(x),
    y: Float64Array.from(y),
    sigmaX: Float64Array.from(sigmaX),
    sigmaY: Float64Array.from(sigmaY),
    correlation: new Float64Array(x.length),
  };
}

describe("scatter beyond the errors", () => {
  it("shows both σ, uses the larger, and says how much scatter it takes", () => {
    const fit = fitPoints(scattered);
    expect(fit.p).toBeLessThan(1e-6);
    expect(fit.usesScatter).toBe(true);
    const [plain, wide] = [fit.slope?.sigma ?? NaN, fit.slope?.sigmaWithScatter ?? NaN];
    expect(wide).toBeGreaterThan(3 * plain);
    // Equal errors, so both σ of the one line differ by √(1 + s²/(σy² + b²σx²)).
    const b = fit.slope?.value ?? NaN;
    const s = fit.scatter ?? NaN;
    expect(wide / plain).toBeCloseTo(Math.sqrt(1 + (s * s) / (0.07 ** 2 + b * b * 0.02 ** 2)), 9);
    // The line is York's for the widened errors, S and MSWD those of the errors alone.
    const points = pointsOf(scattered);
    const widened = york({ ...points, sigmaY: points.sigmaY.map((q) => Math.sqrt(q * q + s * s)) });
    expect(b).toBeCloseTo(widened.slope, 11);
    expect(wide).toBeCloseTo(Math.sqrt(widened.slopeVariance), 11);
    expect(fit.S).toBe(york(points).S);
    expect(fit.problems.find((each) => each.code === "line-with-scatter")?.text).toContain("By the errors alone its slope would be");
    expect((fitOf(fit)?.source.covariance.slopeVariance ?? NaN) ** 0.5).toBeCloseTo(wide, 12);
  });

  it("maximum likelihood: with s added to the errors, Σ(W²r² − W) = 0", () => {
    const points = pointsOf(scattered);
    const { scatter, fit } = intrinsicScatter(points, york(points));
    let score = 0;
    let size = 0;
    points.x.forEach((x, i) => {
      const w = 1 / (0.07 ** 2 + scatter ** 2 + (fit.slope * 0.02) ** 2);
      score += (w * ((points.y[i] ?? NaN) - fit.intercept - fit.slope * x)) ** 2 - w;
      size += w;
    });
    expect(Math.abs(score)).toBeLessThan(1e-8 * size);
  });

  it("× √MSWD is the labelled alternative, and none leaves it out with a warning", () => {
    const likelihood = fitPoints(scattered);
    const root = fitPoints(scattered, { scatter: "root mswd" });
    expect(root.problems.find(({ code }) => code === "root-mswd")?.text).toContain(`√MSWD = ${Math.sqrt(root.mswd ?? NaN).toPrecision(3)}`);
    expect(root.slope?.sigmaWithScatter).toBeCloseTo((root.slope?.sigma ?? NaN) * Math.sqrt(root.mswd ?? NaN), 12);
    expect(root.usesScatter).toBe(true);
    expect(root.scatter).toBeUndefined();
    const none = fitPoints(scattered, { scatter: "none" });
    expect(none.usesScatter).toBe(false);
    expect(none.slope?.sigmaWithScatter).toBeNull();
    expect(codes(none)).toContain("scatter-ignored");
    // Both of these are York's line by the errors alone; the likelihood's is another.
    expect(none.slope?.value).toBe(root.slope?.value);
    expect(none.slope?.sigma).toBe(root.slope?.sigma);
    expect(likelihood.slope?.value).not.toBe(root.slope?.value);
  });

  it("is not used where the errors explain the points", () => {
    const calm = fitPoints({ ...scattered, sigmaY: new Array<number>(12).fill(0.4) });
    expect(calm.p).toBeGreaterThan(0.05);
    expect(calm.usesScatter).toBe(false);
    expect((fitOf(calm)?.source.covariance.slopeVariance ?? NaN) ** 0.5).toBeCloseTo(calm.slope?.sigma ?? NaN, 14);
  });
});

describe("a line through points that err together and scatter", () => {
  it("is right on the mean with the scatter in its errors, where the errors alone pull it aside (400 seeded tables)", () => {
    // x and y with 3 % each and a correlation of 0.8, as two ratios over one element have; a scatter of 0.06 in y; slope 0.5.
    const random = createRandom(11);
    let [withScatter, alone] = [0, 0];
    const tables = 400;
    for (let k = 0; k < tables; k++) {
      const n = 20;
      const points: FitPoints = {
        x: new Float64Array(n),
        y: new Float64Array(n),
        sigmaX: new Float64Array(n).fill(0.03),
        sigmaY: new Float64Array(n).fill(0.03),
        correlation: new Float64Array(n).fill(0.8),
      };
      for (let i = 0; i < n; i++) {
        const shared = random.normal();
        points.x[i] = i / 19 + 0.03 * shared;
        points.y[i] = 0.2 + (0.5 * i) / 19 + 0.03 * (0.8 * shared + 0.6 * random.normal()) + 0.06 * random.normal();
      }
      const fit = york(points);
      alone += fit.slope / tables;
      withScatter += intrinsicScatter(points, fit).fit.slope / tables;
    }
    // One fit's σ is 0.06 or so: the mean of 400 is known to 0.003.
    expect(Math.abs(withScatter - 0.5)).toBeLessThan(0.009);
    expect(Math.abs(alone - 0.5)).toBeGreaterThan(Math.abs(withScatter - 0.5));
  });
});

describe("outliers", () => {
  it("are flagged and stay in the fit", () => {
    const y = scattered.x.map((x, i) => x + (i === 6 ? 2 : 0.05 * (i % 2 === 0 ? 1 : -1)));
    const flagged = (sigma: number): number[] =>
      fitPoints({ ...scattered, y, sigmaY: new Array<number>(12).fill(sigma) })
        .points.filter((point) => point.outlier)
        .map((point) => point.index);
    // With errors that the others keep to, and with errors far too small for all of them.
    expect(flagged(0.3)).toEqual([6]);
    expect(flagged(0.01)).toEqual([6]);
    expect(fitPoints({ ...scattered, y }).n).toBe(12);
    for (const method of ["ordinary least squares", "reduced major axis", "theil-sen"] as const)
      expect(
        fitPoints({ ...scattered, y }, { method })
          .points.filter((point) => point.outlier)
          .map((point) => point.index),
        method,
      ).toEqual([6]);
  });

  it("residuals are studentised: over σ of the point less what the line follows it by", () => {
    const points = { x: [0, 1, 2, 3], y: [0, 1.3, 1.9, 3], sigmaX: [0, 0, 0, 0], sigmaY: [0.2, 0.2, 0.2, 0.2] };
    const fit = fitPoints(points);
    fit.points.forEach((point, i) => {
      const leverage = 1 / 4 + (i - 1.5) ** 2 / 5;
      const r = point.y - (fit.intercept?.value ?? NaN) - (fit.slope?.value ?? NaN) * point.x;
      expect(point.residual).toBeCloseTo(r / (0.2 * Math.sqrt(1 - leverage)), 10);
    });
  });
});

describe("which samples go in", () => {
  const points = { x: [0, 1, 2, 3, 4], y: [0.1, 0.9, 2.1, 2.9, 4.1], sigmaX: [0.1, 0.1, 0.1, null, 0.1], sigmaY: [0.1, 0.1, 0.1, 0.1, 0.1] };

  it("without σ: left out of York's fit, counted and said; least squares takes them", () => {
    const fit = fitPoints(points);
    expect(fit.n).toBe(4);
    expect(fit.leftOut).toEqual({ "without σ": 1 });
    expect(fit.problems.find((each) => each.code === "without-sigma")?.text).toContain("1 sample has no σ on x or y and is left out");
    expect(fitPoints(points, { method: "ordinary least squares" }).n).toBe(5);
  });

  it("by condition, by hand, by state: each counted by why", () => {
    const table = tableOf(
      {
        X: { unit: "1", species: null, value: [0, 1, 2, 3, 4, 5, 6, "<"], sigma: new Array<number>(8).fill(0.1) },
        Y: { unit: "1", species: null, value: [0, 1.1, 2, 2.9, 4, null, 6, 7], sigma: new Array<number>(8).fill(0.1) },
        Group: ["A", "A", "A", "A", "A", "A", "B", "A"],
      },
      { setAside: [1] },
    );
    const block = trend({ where: 'Group == "A"', leaveOut: [{ row: 3, sample: "S3", reason: "weathered" }] });
    const fit = evaluateTrend(block, contextOf(table));
    expect(fit.n).toBe(3);
    expect(fit.points.map((point) => point.row)).toEqual([1, 4, 5]);
    expect(fit.leftOut["left out of this fit"]).toBe(1);
    expect(fit.leftOut["missing"]).toBe(1);
    expect(fit.leftOut["below detection"]).toBe(1);
    expect(Object.values(fit.leftOut).reduce((sum, count) => sum + count, 0)).toBe(5);
  });

  it("an entry that names another sample, or no row, leaves nothing out and is an error", () => {
    const fit = evaluateTrend(
      trend({
        leaveOut: [
          { row: 2, sample: "S9", reason: "x" },
          { row: 44, reason: "y" },
        ],
      }),
      contextOf(pointsTable(points)),
    );
    expect(fit.n).toBe(4);
    expect(codes(fit)).toEqual(expect.arrayContaining(["sample-mismatch", "no-such-row"]));
  });
});

describe("what cannot be fitted says so, at its place", () => {
  const good = { x: [0, 1, 2, 3], y: [0, 1, 2.1, 3], sigmaX: [0.1, 0.1, 0.1, 0.1], sigmaY: [0.1, 0.1, 0.1, 0.1] };

  it("errors in x, y and where each at their own field with a span", () => {
    const result = evaluateTrend(trend({ x: "X + Nowhere", y: "Y +", where: "Z > 1" }), contextOf(pointsTable(good)));
    expect(result.ok).toBe(false);
    expect(result.problems.map((problem) => problem.field)).toEqual(["x", "y", "where"]);
    expect(result.problems[0]?.span).toEqual([4, 11]);
    for (const problem of result.problems) expect(problem.span, problem.text).toBeDefined();
  });

  it("bases that do not match are an error of the axis", () => {
    const result = evaluateTrend(trend({ x: "Mg / Si + atoms(Mg) / atoms(Si)", y: "Al / Si" }), contextOf(twelve()));
    expect(result.problems).toEqual([expect.objectContaining({ field: "x", severity: "error" })]);
  });

  it("two parts of one whole: that they may correlate for that alone; ratios do not", () => {
    expect(codes(evaluateTrend(trend({ x: "Mg", y: "Al" }), contextOf(twelve())))).toContain("closure");
    expect(codes(evaluateTrend(trend({ x: "Mg / Si", y: "Al / Si" }), contextOf(twelve())))).not.toContain("closure");
  });

  it("one value for all samples is no axis; one a class goes with another a class, not with one a sample", () => {
    expect(evaluateTrend(trend({ x: "mean(X)" }), contextOf(pointsTable(good))).problems[0]).toMatchObject({ code: "not-per-sample", field: "x" });
    const byClass = evaluateTrend(trend({ x: "mean(Mg / Si, Group)", y: "Al / Si" }), contextOf(twelve()));
    expect(byClass.problems[0]).toMatchObject({
      code: "not-per-sample",
      field: "y",
      text: expect.stringContaining("On x there is a value for each class of Group and on y a value for each sample") as string,
    });
  });

  it("fewer than three points, all x equal, σ = 0 on both axes: sentences that say what to do", () => {
    const two = fitPoints({ ...good, x: [0, 1, null, null] });
    expect(two.ok).toBe(false);
    expect(two.n).toBe(2);
    expect(two.problems.find((each) => each.code === "too-few-points")?.text).toBe(
      "A line needs at least 3 points with all they need; there are 2. Choose more samples, or see why samples were left out.",
    );
    expect(codes(fitPoints({ ...good, x: [2, 2, 2, 2] }))).toContain("x-all-equal");
    const exact = fitPoints({ ...good, sigmaX: [0.1, 0, 0.1, 0.1], sigmaY: [0.1, 0, 0.1, 0.1] });
    expect(exact.problems.find((each) => each.code === "no-errors")).toMatchObject({ row: 2, text: expect.stringContaining("S2: ") as string });
    expect(codes(fitPoints({ x: good.x, y: good.y }))).toEqual(expect.arrayContaining(["without-sigma", "too-few-points"]));
  });

  it("an axis against itself, or a y without any spread: why there is no line", () => {
    const itself = evaluateTrend(trend({ y: "2 * X" }), contextOf(pointsTable(good)));
    expect(itself.ok).toBe(false);
    expect(itself.problems[0]?.text).toContain("y is calculated from x alone");
    expect(fitPoints({ ...good, y: [2, 2, 2, 2], sigmaY: [0, 0, 0, 0] }).problems[0]?.text).toContain("All 4 points have the same y (2)");
    expect(fitPoints({ ...good, y: [2, 2, 2, 2] }).slope?.value).toBe(0);
  });

  it("no number leaves as NaN: what has no line has no slope", () => {
    const result = fitPoints({ ...good, x: [2, 2, 2, 2] });
    expect(result.slope).toBeUndefined();
    expect(result.crossing).toBeUndefined();
    expect(fitOf(result)).toBeUndefined();
  });

  it("data that have a problem of their own: the trend rests on them and says so", () => {
    const dataProblems = [{ code: "was-mismatch", severity: "error" as const, block: "ch", text: "Row 7 was not 42.1." }];
    const result = evaluateTrend(trend(), contextOf(pointsTable(good), { dataProblems }));
    expect(result.ok).toBe(true);
    expect(result.problems.find((each) => each.code === "data-has-problem")).toMatchObject({
      severity: "warning",
      field: "data",
      text: expect.stringContaining("Row 7 was not 42.1.") as string,
    });
  });
});

describe("bodies", () => {
  it("each alias of the page has its distance from the line; a body whose σ are unknown gives an upper bound", () => {
    const result = evaluateTrend(trend({ x: "Mg / Si", y: "Al / Si" }), contextOf(twelve()));
    expect(result.fromBodies.map((each) => each.body)).toEqual(["CI", "BSE"]);
    for (const each of result.fromBodies) {
      expect(each.distance).toBeGreaterThan(0);
      expect(each.p).toBeGreaterThanOrEqual(0);
      expect(each.p).toBeLessThanOrEqual(1);
    }
  });

  it("one that lacks what an axis needs has none", () => {
    const table = tableOf({
      Mg: { value: [10, 12, 14, 16], sigma: [0.1, 0.1, 0.1, 0.1] },
      T: { unit: "K", species: null, value: [1000, 1100, 1200, 1310], sigma: [10, 10, 10, 10] },
    });
    const result = evaluateTrend(trend({ x: "Mg", y: "T" }), contextOf(table));
    expect(result.ok).toBe(true);
    expect(result.y.unit).toBe("K");
    expect(result.fromBodies).toEqual([]);
  });
});
