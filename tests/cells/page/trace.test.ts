import { describe, expect, it } from "vitest";
import type { Engine, TraceNode, TraceRequest } from "@/cells";
import { csv, data, freshEngine, lineOf, nodesOf, pageOf, ratios, resultOf, trend } from "./pages";

function engineOver(blocks: readonly object[], text = csv, bodies: object = { CI: "CI_PLJ14", BSE: "BSE_MS95" }): Engine {
  const engine = freshEngine(text);
  engine.evaluate(pageOf(blocks, bodies));
  return engine;
}

function traced(engine: Engine, request: TraceRequest): TraceNode {
  const node = engine.trace(request);
  if (node === null) throw new Error(`${request.block}.${request.name} has no trace`);
  return node;
}

/** Shares of the branches, which sum to 1 and are none below 0. */
function sharesOf(node: TraceNode): number[] {
  return node.from.flatMap(({ share }) => (share === null ? [] : [share]));
}

function expectWhole(node: TraceNode): void {
  const shares = sharesOf(node);
  expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
  for (const each of nodesOf(node)) if (each.share !== null) expect(each.share).toBeGreaterThanOrEqual(-1e-12);
}

const formula = (text: string): object => ({ id: "r", kind: "formula", data: "ch", text });

describe("the trace of a formula's line", () => {
  it("goes by conversion to the source cells, with text, σ and header as they stand", () => {
    const engine = engineOver([data(), ratios]);
    const node = traced(engine, { block: "r", name: "mg_si", index: 6 });
    expect(node).toMatchObject({ kind: "result", label: "mg_si = Mg / Si", unit: "1", basis: "mass", share: 1 });
    const [first, second] = node.from;
    expect(first).toMatchObject({ kind: "conversion", label: "Mg", unit: "wt%", notes: [expect.stringMatching(/^Mg = MgO × 0\.60304/)] });
    expect(first?.from).toMatchObject([
      {
        kind: "cell",
        label: "MgO",
        value: 23.1,
        unit: "wt%",
        cell: { block: "ch", row: 7, column: "MgO", raw: "23.1", rawSigma: "0.4", sigmaHeader: "2s MgO" },
      },
    ]);
    expect(first?.from[0]?.sigma).toBeCloseTo(0.2, 12);
    expect(second?.label).toBe("Si");
    // (σ/x)² of each: a ratio's variance is their sum.
    const [mg, si] = [(0.2 / 23.1) ** 2, (0.25 / 33.4) ** 2];
    expect(first?.share).toBeCloseTo(mg / (mg + si), 12);
    expectWhole(node);
  });

  it("has the number that the result has", () => {
    const engine = freshEngine();
    const results = engine.evaluate(pageOf([data(), ratios]));
    for (let index = 0; index < 9; index++) {
      const node = traced(engine, { block: "r", name: "al_si", index });
      expect([node.value, node.sigma]).toEqual([lineOf(results, "al_si").value[index], lineOf(results, "al_si").sigma[index]]);
    }
  });

  it("names the compilation behind an alias, its source and whether it was checked", () => {
    const engine = engineOver([data(), formula("n = norm(Al / Si, CI)\nb = at(Mg / Si, BSE)")]);
    const node = traced(engine, { block: "r", name: "n", index: 0 });
    expect(node.notes).toContain("CI is CI_PLJ14 on this page.");
    const body = node.from.find(({ kind }) => kind === "body");
    expect(body?.label).toBe("Al of CI_PLJ14");
    expect(body?.notes.join(" ")).toMatch(/Palme, Lodders & Jones 2014.*Checked: read in a copy of the source/);
    expectWhole(node);
    const memory = traced(engine, { block: "r", name: "b" });
    expect(memory.share).toBeNull();
    expect(memory.from[0]?.notes.join(" ")).toMatch(/Written down from memory/);
    expect(memory.from[0]).toMatchObject({ sigma: null, share: null });
  });

  it("says what was amended, assumed, set aside and below detection, and why", () => {
    const engine = engineOver([
      data({
        amendments: [{ row: 1, sample: "S1", column: "MgO", was: "24.1", value: "24.5", reason: "digits swapped", by: "Ada" }],
        assumed: [{ column: "CaO", relative: 0.05, reason: "usual repeatability" }],
        setAside: [{ row: 2, sample: "S2", reason: "weathered" }],
      }),
      formula("ca_mg = Ca / Mg"),
    ]);
    const notes = (index: number): string =>
      nodesOf(traced(engine, { block: "r", name: "ca_mg", index }))
        .flatMap((node) => node.notes)
        .join(" ");
    expect(notes(0)).toContain("Amended from “24.1” to “24.5”: digits swapped (Ada)");
    expect(notes(0)).toContain("Its σ is assumed, 5 % of the value: usual repeatability");
    expect(notes(1)).toContain("The sample is set aside: weathered");
    expect(notes(6)).toContain("Below detection (limit 0.1 wt%): it counts as no number, never as 0.");
    expect(notes(8)).toContain("There is no number in this cell.");
    const missing = traced(engine, { block: "r", name: "ca_mg", index: 8 });
    expect(missing).toMatchObject({ value: null, sigma: null, share: null });
    expect(missing.notes).toContain("It has no value: it is missing.");
  });

  it("says that a value below detection was substituted, and by what", () => {
    const engine = engineOver([data({ substitute: { fraction: 0.5, reason: "asked for by the journal" } }), formula("ca = Ca")]);
    const notes = nodesOf(traced(engine, { block: "r", name: "ca", index: 6 })).flatMap((node) => node.notes);
    expect(notes.join(" ")).toContain("Below detection (limit 0.1 wt%); counted as 0.5 of the limit: asked for by the journal");
  });

  it("calls a σ of which only a part is known a lower bound, and names the input", () => {
    const node = traced(engineOver([data(), formula("ca_mg = Ca / Mg")]), { block: "r", name: "ca_mg", index: 0 });
    expect(node.notes).toContain("The σ is a lower bound: that of CaO is unknown.");
    const [mg, ca] = node.from;
    expect(mg).toMatchObject({ label: "Mg" });
    expect(mg?.share).toBeCloseTo(1, 12);
    expect(ca).toMatchObject({ label: "Ca", share: null, sigma: null });
    expect(ca?.from[0]?.notes).toContain("Its σ is unknown: the source gives none.");
  });

  it("divides a declared covariance and says so", () => {
    const engine = engineOver([data({ correlations: [{ of: ["MgO", "SiO2"], value: 0.5 }] }), formula("mg_si = Mg / Si")]);
    const node = traced(engine, { block: "r", name: "mg_si", index: 0 });
    expect(node.notes.join(" ")).toContain("The errors of Mg and Si are correlated");
    expectWhole(node);
    expect(node.from).toHaveLength(2);
  });

  it("gives correlated inputs one share where an own one would be below 0", () => {
    const engine = engineOver([data({ correlations: [{ of: ["MgO", "Al2O3"], value: 0.95 }] }), formula("d = Mg - Al")]);
    const node = traced(engine, { block: "r", name: "d", index: 0 });
    expect(node.from).toHaveLength(1);
    expect(node.from[0]).toMatchObject({ label: "Mg and Al", share: 1 });
    expect(node.from[0]?.notes.join(" ")).toContain("partly cancel");
    expectWhole(node);
  });

  it("goes through other lines, and one column behind two names is one branch", () => {
    const engine = engineOver([data(), formula("mg_si = Mg / Si\nd = mg_si * MgO")]);
    const node = traced(engine, { block: "r", name: "d", index: 0 });
    expect(node.notes).toContain("By way of mg_si = Mg / Si (r).");
    expect(node.from.map(({ label }) => label)).toEqual(["Mg, MgO", "Si"]);
    expectWhole(node);
  });

  it("lists the samples of a mean, and the numbers written in the formula", () => {
    const engine = engineOver([data(), ratios, { id: "q", kind: "formula", data: "ch", text: 'm = 2 * mean(mg_si, "CV")' }]);
    const node = traced(engine, { block: "q", name: "m" });
    const [mean, two] = node.from;
    expect(mean).toMatchObject({ kind: "aggregate", share: 1 });
    expect(mean?.from.map(({ label }) => label).sort()).toEqual(["S1", "S2", "S3", "S4"]);
    expect(nodesOf(mean as TraceNode).filter(({ kind }) => kind === "cell")).toHaveLength(8);
    expect(two).toMatchObject({ kind: "constant", label: "2", value: 2, share: 0 });
  });

  it("follows a fit and a budget that it uses, their shares brought down to what they have here", () => {
    const engine = engineOver([data(), ratios, trend("t", "CV"), { id: "q", kind: "formula", data: "ch", text: "s = t.slope * mg_si" }]);
    const node = traced(engine, { block: "q", name: "s", index: 0 });
    const fit = node.from.find(({ kind }) => kind === "fit");
    expect(fit?.label).toBe("slope of t");
    expect(sharesOf(fit as TraceNode).reduce((sum, share) => sum + share, 0)).toBeCloseTo(fit?.share ?? Number.NaN, 10);
    expectWhole(node);
  });

  it("comes down to the source cell through stacked tables", () => {
    const engine = engineOver([data(), { id: "all", kind: "data", stack: ["ch"] }, { ...ratios, data: "all" }]);
    const cells = nodesOf(traced(engine, { block: "r", name: "mg_si", index: 3 })).filter(({ kind }) => kind === "cell");
    expect(cells.map(({ cell }) => [cell?.block, cell?.row, cell?.raw])).toEqual(
      expect.arrayContaining([
        ["ch", 4, "25.6"],
        ["ch", 4, "33.1"],
      ]),
    );
  });

  it("is null where there is no such number", () => {
    const engine = engineOver([data(), ratios]);
    for (const request of [
      { block: "nowhere", name: "x" },
      { block: "r", name: "nothing", index: 0 },
      { block: "r", name: "mg_si", index: 9 },
      { block: "r", name: "mg_si", index: -1 },
      { block: "r", name: "mg_si" },
      { block: "ch", name: "Sample", index: 0 },
      { block: "ch", name: "MgO" },
    ])
      expect(engine.trace(request)).toBeNull();
  });
});

describe("the trace of other numbers", () => {
  it("of a column is its cell", () => {
    const node = traced(engineOver([data()]), { block: "ch", name: "Al2O3", index: 2 });
    expect(node).toMatchObject({ label: "Al2O3", value: 2.9, unit: "wt%", share: 1 });
    expect(node.from).toMatchObject([{ kind: "cell", cell: { block: "ch", row: 3, raw: "2.9", rawSigma: "0.1" } }]);
  });

  it("of a slope and an intercept are the samples of the fit, by their part in the variance", () => {
    const engine = freshEngine();
    const results = engine.evaluate(pageOf([data(), ratios, trend("t", "CV")]));
    const fit = resultOf(results, "t", "trend");
    for (const name of ["slope", "intercept"] as const) {
      const node = traced(engine, { block: "t", name });
      expect(node).toMatchObject({ value: fit[name]?.value, sigma: fit[name]?.sigma });
      expectWhole(node);
      const [samples] = node.from;
      expect(samples?.from.map(({ label }) => label).sort()).toEqual(["S1", "S2", "S3", "S4"]);
      expect(sharesOf(samples as TraceNode).reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
      // The ends of a line decide its slope.
      if (name === "slope")
        expect(
          samples?.from
            .slice(0, 2)
            .map(({ label }) => label)
            .sort(),
        ).toEqual(["S3", "S4"]);
    }
  });

  it("of a fit to normalised ratios has the body's share beside that of the samples", () => {
    const normalised = { ...trend("t", "CV"), x: "mg_si", y: "norm(al_si, CI)" };
    const node = traced(engineOver([data(), ratios, normalised]), { block: "t", name: "slope" });
    expect(node.from.map(({ label }) => label)).toEqual(expect.arrayContaining(["samples of t", "Al of CI_PLJ14", "Si of CI_PLJ14"]));
    expectWhole(node);
  });

  it("of a crossing are both lines", () => {
    const engine = freshEngine();
    const aside = data({ setAside: [{ row: 8, sample: "S8", reason: "weathered" }] });
    const results = engine.evaluate(pageOf([aside, ratios, trend("t", "CV", { crossWith: "t2" }), trend("t2", "CO")]));
    const { crossing } = resultOf(results, "t", "trend");
    const node = traced(engine, { block: "t", name: "crossing.x" });
    expect(node.value).toBe(crossing?.x.value);
    expect(node.from.map(({ label }) => label).sort()).toEqual(["samples of t", "samples of t2"]);
    expectWhole(node);
    expect(traced(engine, { block: "t", name: "crossing.y" }).sigma).toBe(crossing?.y.sigma);
  });

  it("of a solved amount and of a report are the inputs of the budget, with their sources", () => {
    const budget = {
      id: "b",
      kind: "budget",
      start: { body: "BSE" },
      steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0.01 }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { body: "CI" } },
      report: ["Mg / Si", "Al / Si"],
    };
    const engine = freshEngine();
    const results = engine.evaluate(pageOf([budget]));
    const { solved, shares } = resultOf(results, "b", "budget");
    const node = traced(engine, { block: "b", name: "solved" });
    expect(node).toMatchObject({ value: solved?.value, sigma: solved?.sigma, unit: "wt%" });
    expectWhole(node);
    for (const { input, share } of shares) expect(node.from.find(({ label }) => label === input)?.share).toBeCloseTo(share, 10);
    expect(node.notes.join(" ")).toContain("Solved so that Mg / Si is that of CI.");
    const report = traced(engine, { block: "b", name: "Al/Si" });
    expect(report.notes.join(" ")).toContain("Its target is");
    expectWhole(report);
  });

  it("that a note quotes is found by the note's own request", () => {
    const engine = freshEngine();
    const note = { id: "n", kind: "note", text: "Slope {{t.slope}}, mean {{m}}." };
    const results = engine.evaluate(pageOf([data(), ratios, trend("t", "CV"), { id: "q", kind: "formula", data: "ch", text: "m = mean(mg_si)" }, note]));
    const { values } = resultOf(results, "n", "note");
    expect(values).toHaveLength(2);
    for (const { trace, value } of values) {
      if (trace === undefined) throw new Error("a quoted number can be traced");
      expect(traced(engine, trace).value).toBe(value);
    }
  });
});
