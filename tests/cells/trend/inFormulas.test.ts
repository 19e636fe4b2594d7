import { describe, expect, it } from "vitest";

import { createEngine, readPageDocument, type LineResult, type PageResults, type TraceNode, type TrendResult } from "@/cells";
import { createRandom } from "../../../cells/numeric";
import { york } from "../../../cells/trend/york";

const SEED = 90210;
/** Twelve invented rocks: six along Al/Si = 0.1 + 0.16 (Mg/Si − 1), six along 0.11 − 0.14 (Mg/Si − 1). */
const n = 12;
const Si = Array.from({ length: n }, (_, i) => 20 + 0.15 * i);
const mgSi = [0.7, 0.76, 0.83, 0.9, 0.97, 1.04, 0.95, 1.02, 1.08, 1.15, 1.22, 1.29];
const Mg = Si.map((si, i) => si * (mgSi[i] ?? NaN));
const Al = Si.map((si, i) => si * (i < 6 ? 0.1 + 0.16 * ((mgSi[i] ?? NaN) - 1) : 0.11 - 0.14 * ((mgSi[i] ?? NaN) - 1)));
const relative = { Mg: 0.006, Al: 0.008, Si: 0.005 };

type Errors = typeof relative;

function page(
  blocks: readonly object[],
  errors: Errors = relative,
  al: readonly number[] = Al,
): PageResults & { trace(name: string, index: number): TraceNode | null } {
  const quantity = (name: "Mg" | "Al" | "Si"): object[] => [
    { name, header: name, role: "quantity", species: name, unit: "wt%" },
    { name: `s${name}`, header: `s${name}`, role: "uncertainty", of: name, as: "1 sigma" },
  ];
  const typed = Si.map((si, i) => ({
    id: `r${i + 1}`,
    cells: {
      Sample: `S${i + 1}`,
      Group: i < 6 ? "A" : "B",
      Mg: String(Mg[i]),
      sMg: String((Mg[i] ?? NaN) * errors.Mg),
      Al: String(al[i]),
      sAl: String((Al[i] ?? NaN) * errors.Al),
      Si: String(si),
      sSi: String(si * errors.Si),
    },
  }));
  const columns = [{ name: "Sample", role: "sample" }, { name: "Group", role: "class" }, ...(["Mg", "Al", "Si"] as const).flatMap(quantity)];
  const engine = createEngine();
  const results = engine.evaluate(
    readPageDocument({
      format: "cotectic-page/1",
      title: "Test page",
      bodies: { CI: "CI_PLJ14" },
      blocks: [{ id: "ch", kind: "data", typed, columns }, ...blocks],
    }),
  );
  return { ...results, trace: (name, index) => engine.trace({ block: "f", name, index }) };
}

const t = (fields: object = {}): object => ({
  id: "t",
  kind: "trend",
  data: "ch",
  x: "Mg / Si",
  y: "Al / Si",
  where: 'Group == "A"',
  method: "york",
  scatter: "none",
  ...fields,
});
const f = (text: string): object => ({ id: "f", kind: "formula", data: "ch", text });
const residual = "residual = Al / Si - t.slope * Mg / Si - t.intercept";

function lineOf(results: PageResults, name: string): LineResult {
  const result = results.blocks.get("f");
  const line = result?.kind === "formula" ? result.lines.find((each) => each.name === name) : undefined;
  if (line?.ok !== true) throw new Error(`no line ${name}: ${result?.problems.map(({ text }) => text).join(" ") ?? ""}`);
  return line;
}
function trendOf(results: PageResults, id: string): TrendResult {
  const result = results.blocks.get(id);
  if (result?.kind !== "trend" || !result.ok) throw new Error(`no trend ${id}`);
  return result;
}

describe("a formula that uses the line of its own samples", () => {
  it("has the σ that 4,000 draws of the measurements show, in the fit and beside it", () => {
    const results = page([t(), f(residual)]);
    const said = lineOf(results, "residual").sigma;
    const { points } = trendOf(results, "t");
    const random = createRandom(SEED);
    const sum = new Float64Array(n);
    const square = new Float64Array(n);
    const draws = 4000;
    for (let k = 0; k < draws; k++) {
      const si = Si.map((v) => v * (1 + relative.Si * random.normal()));
      const x = Mg.map((v, i) => (v * (1 + relative.Mg * random.normal())) / (si[i] ?? NaN));
      const y = Al.map((v, i) => (v * (1 + relative.Al * random.normal())) / (si[i] ?? NaN));
      const line = york({
        x: Float64Array.from(x.slice(0, 6)),
        y: Float64Array.from(y.slice(0, 6)),
        sigmaX: Float64Array.from(points, (point) => point.sigmaX),
        sigmaY: Float64Array.from(points, (point) => point.sigmaY),
        correlation: Float64Array.from(points, (point) => point.correlation),
      });
      x.forEach((at, i) => {
        const r = (y[i] ?? NaN) - line.slope * at - line.intercept;
        sum[i] = (sum[i] ?? 0) + r;
        square[i] = (square[i] ?? 0) + r * r;
      });
    }
    // σ of 4,000 draws is known to 1.1 %; without what they share, √((1 + h)/(1 − h)) by the leverages h: 20 % too large in the middle of the line, 80 % at its ends.
    const ratios = Array.from(said, (sigma, i) => sigma / Math.sqrt((square[i] ?? NaN) / draws - ((sum[i] ?? NaN) / draws) ** 2));
    process.stdout.write(`residuals, seed ${SEED}: σ said / seen ${ratios.map((ratio) => ratio.toFixed(3)).join(" ")}\n`);
    for (const ratio of ratios) expect(Math.abs(ratio - 1)).toBeLessThan(0.05);
  });

  it("with errors in y alone: σ² (1 − h), h the leverage (the hat matrix of weighted least squares)", () => {
    const results = page([t(), f(residual)], { ...relative, Mg: 0, Si: 0 });
    const { sigma } = lineOf(results, "residual");
    const x = mgSi.slice(0, 6);
    const sigmas = Al.map((v, i) => (v * relative.Al) / (Si[i] ?? NaN));
    const w = sigmas.slice(0, 6).map((s) => 1 / (s * s));
    const total = w.reduce((a, b) => a + b, 0);
    const centre = x.reduce((a, v, i) => a + v * (w[i] ?? NaN), 0) / total;
    const spread = x.reduce((a, v, i) => a + (v - centre) ** 2 * (w[i] ?? NaN), 0);
    mgSi.forEach((at, i) => {
      const height = 1 / total + (at - centre) ** 2 / spread;
      const own = (sigmas[i] ?? NaN) ** 2;
      expect(sigma[i], `row ${i + 1}`).toBeCloseTo(Math.sqrt(i < 6 ? own - height : own + height), 10);
    });
  });

  it("by least squares: the line's own σ and the sample's, less twice what they share", () => {
    const bent = Al.map((v, i) => v * (1 + 0.01 * ([1, -1, 0.5, -0.5, 1.5, -1.5][i % 6] ?? 0)));
    const results = page([t({ method: "ordinary least squares", scatter: undefined }), f(residual)], { ...relative, Mg: 0, Si: 0 }, bent);
    const { sigma } = lineOf(results, "residual");
    const x = mgSi.slice(0, 6);
    const y = bent.slice(0, 6).map((v, i) => v / (Si[i] ?? NaN));
    const [mx, my] = [x.reduce((a, b) => a + b) / 6, y.reduce((a, b) => a + b) / 6];
    const xx = x.reduce((a, v) => a + (v - mx) ** 2, 0);
    const slope = x.reduce((a, v, i) => a + (v - mx) * ((y[i] ?? NaN) - my), 0) / xx;
    const s2 = y.reduce((a, v, i) => a + (v - my - slope * ((x[i] ?? NaN) - mx)) ** 2, 0) / 4;
    mgSi.forEach((at, i) => {
      const h = 1 / 6 + (at - mx) ** 2 / xx;
      const own = (((Al[i] ?? NaN) * relative.Al) / (Si[i] ?? NaN)) ** 2;
      expect(sigma[i], `row ${i + 1}`).toBeCloseTo(Math.sqrt(i < 6 ? own + s2 * h - 2 * own * h : own + s2 * h), 10);
    });
  });

  it("leans on the body that normalised its samples once: it cancels where the residual does not depend on it", () => {
    const plain = page([t(), f(residual)]);
    const normal = page([
      t({ x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" }),
      f(
        "residual = (norm(Al / Si, CI) - t.slope * norm(Mg / Si, CI) - t.intercept) * at(Al / Si, CI)\nslope = t.slope\nback = t.slope * at(Al / Si, CI) / at(Mg / Si, CI)",
      ),
    ]);
    const [a, b] = [lineOf(plain, "residual").sigma, lineOf(normal, "residual").sigma];
    for (let i = 0; i < 6; i++) expect((b[i] ?? NaN) / (a[i] ?? NaN)).toBeCloseTo(1, 3);
    expect(lineOf(normal, "slope").sigma[0]).toBeCloseTo(trendOf(normal, "t").slope?.sigma ?? NaN, 12);
    const own = trendOf(plain, "t").slope?.sigma ?? NaN;
    expect((lineOf(normal, "back").sigma[0] ?? NaN) / own).toBeCloseTo(1, 6);
    expect(trendOf(normal, "t").slope?.sigma ?? NaN).toBeGreaterThan((1.1 * own * (trendOf(normal, "t").slope?.value ?? NaN)) / 0.16);
  });

  it("a fit of a fit: with errors in y alone, slope of (y − t.slope x) plus t.slope has the σ of the slope, bodies counted once", () => {
    const results = page(
      [
        t({ x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" }),
        t({ id: "t2", x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI) - t.slope * norm(Mg / Si, CI)" }),
        f("whole = t2.slope + t.slope"),
      ],
      { ...relative, Mg: 0, Si: 0 },
    );
    const whole = lineOf(results, "whole");
    expect(whole.value[0]).toBeCloseTo(trendOf(results, "t").slope?.value ?? NaN, 10);
    expect((whole.sigma[0] ?? NaN) / (trendOf(results, "t").slope?.sigma ?? NaN)).toBeCloseTo(1, 8);
  });

  it("a crossing shares with its bodies too: brought back from normalised to plain, its σ is the plain one's", () => {
    const second = (fields: object = {}): object => t({ id: "t2", where: 'Group == "B"', ...fields });
    const normalised = { x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" };
    const plain = page([t({ crossWith: "t2" }), second(), f("x = t.crossing_x\ny = t.crossing_y")]);
    const normal = page([
      t({ crossWith: "t2", ...normalised }),
      second(normalised),
      f("x = t.crossing_x * at(Mg / Si, CI)\ny = t.crossing_y * at(Al / Si, CI)"),
    ]);
    const { crossing } = trendOf(plain, "t");
    expect(crossing?.region).toBe("ellipse");
    for (const axis of ["x", "y"] as const) {
      expect((lineOf(plain, axis).sigma[0] ?? NaN) / (crossing?.[axis].sigma ?? NaN)).toBeCloseTo(1, 10);
      expect((lineOf(normal, axis).sigma[0] ?? NaN) / (crossing?.[axis].sigma ?? NaN)).toBeCloseTo(1, 6);
    }
  });

  it("traces to shares that sum to 1, what samples and line have in common halved between them", () => {
    const root = page([t(), f(residual)]).trace("residual", 0);
    const shares = (root?.from ?? []).map(({ share }) => share ?? 0);
    expect(shares.length).toBeGreaterThan(1);
    expect(shares.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 9);
  });

  it("a mean of residuals about a least-squares line is 0, and knows that it hardly can be anything else", () => {
    const bent = Al.map((v, i) => v * (1 + 0.01 * ([1, -1, 0.5, -0.5, 1.5, -1.5][i % 6] ?? 0)));
    const text = 'm = mean(Al / Si - t.slope * Mg / Si - t.intercept, "A")\napart = mean(Al / Si, "A")';
    const results = page([t({ method: "ordinary least squares", scatter: undefined }), f(text)], relative, bent);
    const m = lineOf(results, "m");
    expect(Math.abs(m.value[0] ?? NaN)).toBeLessThan(1e-15);
    // s²/n of the line has n − 2 degrees of freedom and the mean's n − 1: σ² = s²/n (1 + 4/5 − 2 √(4/5)) for n = 6, by hand.
    const { points, slope, intercept } = trendOf(results, "t");
    const square = points.reduce((sum, { x, y }) => sum + (y - (slope?.value ?? NaN) * x - (intercept?.value ?? NaN)) ** 2, 0);
    expect((m.sigma[0] ?? NaN) / Math.sqrt(square / 4 / 6)).toBeLessThan(0.15);
  });
});
