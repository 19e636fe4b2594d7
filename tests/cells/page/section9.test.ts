import { describe, expect, it } from "vitest";
import { resultsJson } from "@/cells";
import { csv, data, errorsOf, evaluate, freshEngine, lineOf, nodesOf, pageOf, ratios, resultOf, trend } from "./pages";

/** What makes a scientist reject a tool like this, each as a test of whole pages. */
const formula = (text: string, more: object = {}): object => ({ id: "r", kind: "formula", data: "ch", text, ...more });

/** Twelve invented samples on a line, with errors as large as their scatter about it. */
const line = (sigma: number, off: (i: number) => number): string =>
  [
    "Sample,MgO (wt%),2s MgO,SiO2 (wt%),2s SiO2,Al2O3 (wt%),2s Al2O3",
    ...Array.from({ length: 12 }, (_, i) => {
      const mg = 20 + i * 0.5;
      return `L${i + 1},${mg},${2 * sigma},40,${2 * sigma},${(2 + 0.2 * i + off(i)).toFixed(5)},${2 * sigma}`;
    }),
  ].join("\n");
const wave =
  (size: number) =>
  (i: number): number =>
    size * ([1, -1, 0.5, -0.8, 0.9, -1, 0.7, -0.4, 1, -0.9, 0.3, -0.4][i] ?? 0);
const lineColumns = [
  { header: "Sample", role: "sample" },
  ...["MgO", "SiO2", "Al2O3"].flatMap((name) => [
    { header: `${name} (wt%)`, name, role: "quantity", species: name, unit: "wt%" },
    { header: `2s ${name}`, role: "uncertainty", of: name, as: "2 sigma" },
  ]),
];
const lineData = { id: "ch", kind: "data", source: { file: "ch.csv" }, columns: lineColumns };
const fit = (more: object = {}): object => ({ id: "t", kind: "trend", data: "ch", x: "Mg / Si", y: "Al / Si", method: "york", ...more });

describe("silent renormalisation", () => {
  it("does not happen: a table that sums to 61 % is calculated as it stands", () => {
    const results = evaluate(data(), formula("sum = MgO + SiO2 + Al2O3\nmg = MgO"));
    expect(lineOf(results, "sum").value[0]).toBeCloseTo(24.1 + 34 + 3.2, 10);
    expect(lineOf(results, "mg").value[0]).toBeCloseTo(24.1, 12);
  });

  it("does not hide in a plot: a ternary, which must divide by the sum, says so on its axes", () => {
    const results = evaluate(data(), { id: "p", kind: "plot", plot: "ternary", drawn: [{ data: "ch", x: "MgO", y: "SiO2", z: "Al2O3" }] });
    const { x, y } = resultOf(results, "p", "plot");
    expect([x.label, y.label]).toEqual(["MgO/(MgO + SiO2 + Al2O3)", "SiO2/(MgO + SiO2 + Al2O3)"]);
  });

  it("does not touch what a row becomes when another column is missing", () => {
    const results = evaluate(data(), formula("mg_si = Mg / Si"));
    expect(lineOf(results, "mg_si").value[8]).toBeCloseTo(((25.9 / 33.7) * 0.603042) / 0.467437, 5);
  });
});

describe("mass and atomic ratios", () => {
  it("unlabelled do not exist: every ratio states its basis in results and on axes", () => {
    const page = pageOf([
      data(),
      formula("by_mass = Mg / Si\nby_atoms = atoms(Mg) / atoms(Si)\nunits = mol(MgO) / mol(Al2O3)\nnone = norm(Mg / Si, CI)"),
      { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "by_atoms", y: "by_mass" }] },
      { ...fit(), x: "by_atoms" },
    ]);
    const results = freshEngine().evaluate(page);
    expect(resultOf(results, "r", "formula").lines.map(({ basis }) => basis)).toEqual(["mass", "atoms", "formula units", null]);
    expect(resultOf(results, "r", "formula").lines[3]?.remark).toBe("normalised to CI (CI_PLJ14)");
    const plot = resultOf(results, "p", "plot");
    expect([plot.x.basis, plot.y.basis]).toEqual(["atoms", "mass"]);
    expect(resultOf(results, "t", "trend").x.basis).toBe("atoms");
    expect(resultsJson(results)).toMatchObject({
      blocks: { r: { lines: [{ basis: "mass" }, { basis: "atoms" }, { basis: "formula units" }, { basis: null }] } },
    });
  });

  it("differ, and are not compared: forsterite's Mg/Si is 2 by atoms and 1.7308 by mass", () => {
    const results = evaluate({
      id: "r",
      kind: "formula",
      text: "atoms_fo = at(atoms(Mg) / atoms(Si), forsterite)\nmass_fo = at(Mg / Si, forsterite)\nwrong = atoms_fo - mass_fo",
    });
    expect(lineOf(results, "atoms_fo").value[0]).toBeCloseTo(2, 12);
    expect(lineOf(results, "mass_fo").value[0]).toBeCloseTo(1.7308, 4);
    expect(errorsOf(results, "r")).toMatchObject([{ code: "basis-mismatch" }]);
  });

  it("are not solved against each other in a budget", () => {
    const results = evaluate({
      id: "b",
      kind: "budget",
      start: { body: "BSE" },
      steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323 }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { value: 1.05, basis: "atoms" } },
    });
    expect(errorsOf(results, "b").length).toBeGreaterThan(0);
    expect(resultOf(results, "b", "budget").solved).toBeUndefined();
    expect(errorsOf(results, "b")[0]?.text).toMatch(/atoms/);
  });
});

describe("the correlation of ratios", () => {
  it("is not dropped: two ratios over one element share its error, in formula, plot and fit alike", () => {
    const blocks = [data(), ratios, trend("t", "CV"), { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "ch", x: "mg_si", y: "al_si" }] }];
    const results = evaluate(...blocks);
    // ρ = (σSi/Si)² / √((σMg/Mg)² + (σSi/Si)²) √((σAl/Al)² + (σSi/Si)²), by hand for S1.
    const [mg, si, al] = [0.2 / 24.1, 0.25 / 34, 0.05 / 3.2];
    const rho = (si * si) / (Math.sqrt(mg * mg + si * si) * Math.sqrt(al * al + si * si));
    expect(resultOf(results, "r", "formula").correlation).toMatchObject([{ of: ["mg_si", "al_si"] }]);
    expect(resultOf(results, "r", "formula").correlation[0]?.value[0]).toBeCloseTo(rho, 12);
    const [samples] = resultOf(results, "p", "plot").layers;
    expect(samples?.what === "samples" ? samples.points.correlation[0] : undefined).toBeCloseTo(rho, 12);
    expect(resultOf(results, "t", "trend").points[0]?.correlation).toBeCloseTo(rho, 12);
  });

  it("is not dropped where one formula uses another: what cancels has no error", () => {
    const results = evaluate(data(), formula("a = Mg / Si\nb = Al / Si\nsame = a / b - Mg / Al\nratio = a / b"));
    expect(lineOf(results, "same").sigma[0]).toBeCloseTo(0, 12);
    const value = lineOf(results, "ratio").value[0] ?? 0;
    expect((lineOf(results, "ratio").sigma[0] ?? 0) / value).toBeCloseTo(Math.sqrt((0.2 / 24.1) ** 2 + (0.05 / 3.2) ** 2), 10);
  });
});

describe("a common error", () => {
  it("is not counted as independent: normalising to a body changes neither MSWD nor p of a fit", () => {
    const engine = freshEngine(line(0.05, wave(0.12)));
    const raw = resultOf(engine.evaluate(pageOf([lineData, fit()])), "t", "trend");
    const normalised = resultOf(engine.evaluate(pageOf([lineData, fit({ x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" })])), "t", "trend");
    expect(normalised.mswd).toBeCloseTo(raw.mswd ?? Number.NaN, 8);
    expect(normalised.p).toBeCloseTo(raw.p ?? Number.NaN, 8);
    // What is common is carried through once: the slope's relative σ grows by that of CI's Mg/Al, √(4 %² + 6 %²).
    const relative = (of: typeof raw): number => (of.slope?.sigma ?? Number.NaN) / (of.slope?.value ?? Number.NaN);
    expect(relative(normalised)).toBeCloseTo(Math.sqrt(relative(raw) ** 2 + 0.04 ** 2 + 0.06 ** 2), 6);
  });

  it("is not averaged away by a mean over many samples", () => {
    const results = evaluate(data(), formula("n = norm(Mg / Si, CI)\nm = mean(n)\nplain = mean(Mg / Si)"));
    const relative = (name: string): number => (lineOf(results, name).sigma[0] ?? Number.NaN) / (lineOf(results, name).value[0] ?? Number.NaN);
    expect(relative("m")).toBeCloseTo(Math.sqrt(relative("plain") ** 2 + 0.04 ** 2 + 0.03 ** 2), 10);
  });

  it("has its share in the trace, beside that of the sample", () => {
    const engine = freshEngine();
    engine.evaluate(pageOf([data(), formula("n = norm(Mg / Si, CI)")]));
    const node = engine.trace({ block: "r", name: "n", index: 0 });
    const share = (kind: string): number => node?.from.filter((each) => each.kind === kind).reduce((sum, each) => sum + (each.share ?? 0), 0) ?? Number.NaN;
    const [own, common] = [(0.2 / 24.1) ** 2 + (0.25 / 34) ** 2, 0.04 ** 2 + 0.03 ** 2];
    expect(share("body")).toBeCloseTo(common / (own + common), 10);
    expect(share("conversion")).toBeCloseTo(own / (own + common), 10);
  });
});

describe("an unnamed CI", () => {
  const budget = {
    id: "b",
    kind: "budget",
    start: { body: "BSE" },
    steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323 }, amount: "solve" }],
    target: { expression: "Mg / Si", equals: { body: "CI" } },
  };

  it("does not exist: every result names the compilation that CI means", () => {
    const results = evaluate(data(), formula("n = norm(Mg / Si, CI)"), fit({ y: "norm(Al / Si, CI)" }), budget, {
      id: "p",
      kind: "plot",
      plot: "scatter",
      drawn: [{ data: "ch", x: "Mg / Si", y: "Al / Si" }, { bodies: ["CI"] }],
    });
    expect(results.bodies).toEqual({ CI: "CI_PLJ14", BSE: "BSE_MS95" });
    for (const handle of ["r", "t", "b", "p"]) expect(results.blocks.get(handle)?.bodiesUsed).toMatchObject({ CI: "CI_PLJ14" });
    expect(resultsJson(results)).toMatchObject({ blocks: { r: { bodies: { CI: "CI_PLJ14" } }, b: { bodies: { BSE: "BSE_MS95" } } } });
  });

  it("does not exist where the page has no alias: CI alone is an error that says what to write", () => {
    const results = freshEngine().evaluate(pageOf([data(), formula("n = norm(Mg / Si, CI)\nm = norm(Mg / Si, CI_PLJ14)")], {}));
    expect(errorsOf(results, "r")).toMatchObject([{ code: "unknown-body" }]);
    expect(errorsOf(results, "r")[0]?.text).toContain("Give the page an alias of this name");
    expect(resultOf(results, "r", "formula").bodiesUsed).toEqual({ CI_PLJ14: "CI_PLJ14" });
  });

  it("matters: another compilation is another number", () => {
    const first = (id: string): number | undefined =>
      lineOf(freshEngine().evaluate(pageOf([data(), formula("n = norm(Mg / Si, CI)")], { CI: id })), "n").value[0];
    expect(first("CI_PLJ14")).not.toBe(first("CI_WK88"));
  });
});

describe("scatter", () => {
  it("is not ignored: where samples scatter more than their errors, the σ with scatter is the one in use", () => {
    const engine = freshEngine(line(0.005, wave(0.1)));
    const blocks = [
      lineData,
      fit(),
      { id: "f", kind: "formula", data: "ch", text: "s = t.intercept" },
      { id: "p", kind: "plot", plot: "scatter", drawn: [{ trend: "t" }] },
      { id: "n", kind: "note", text: "{{t.slope}}" },
    ];
    const results = engine.evaluate(pageOf(blocks));
    const found = resultOf(results, "t", "trend");
    expect(found.p).toBeLessThan(0.05);
    expect(found.usesScatter).toBe(true);
    expect(found.scatter).toBeGreaterThan(0);
    const [plain, scattered] = [found.slope?.sigma ?? Number.NaN, found.slope?.sigmaWithScatter ?? Number.NaN];
    expect(scattered).toBeGreaterThan(3 * plain);
    // Bands, formulas, notes and traces all use it.
    const [drawn] = resultOf(results, "p", "plot").layers;
    if (drawn?.what !== "trend" || drawn.band === undefined) throw new Error("the trend is drawn with its band");
    expect(drawn.usesScatter).toBe(true);
    const { intercept, covarianceWithScatter = Number.NaN } = found;
    const x = drawn.band.x[50] ?? 0;
    const variance = (intercept?.sigmaWithScatter ?? Number.NaN) ** 2 + 2 * x * covarianceWithScatter + x * x * scattered ** 2;
    expect((drawn.band.upper[50] ?? 0) - (drawn.band.lower[50] ?? 0)).toBeCloseTo(2 * 1.959964 * Math.sqrt(variance), 6);
    expect(lineOf(results, "s", "f").sigma[0]).toBeCloseTo(found.intercept?.sigmaWithScatter ?? Number.NaN, 12);
    expect(resultOf(results, "n", "note").values[0]?.sigma).toBe(scattered);
    const node = engine.trace({ block: "t", name: "slope" });
    expect(node?.sigma).toBe(scattered);
    expect(
      node === null
        ? ""
        : nodesOf(node)
            .flatMap(({ notes }) => notes)
            .join(" "),
    ).toContain("scatter more than their errors say");
  });

  it("is not invented where the errors explain it", () => {
    const found = resultOf(freshEngine(line(0.1, wave(0.05))).evaluate(pageOf([lineData, fit()])), "t", "trend");
    expect(found.p).toBeGreaterThan(0.05);
    expect(found.usesScatter).toBe(false);
  });
});

describe("1σ mixed with 2σ", () => {
  it("does not happen: a column of 2σ is halved once, and its cell keeps what the source says", () => {
    const engine = freshEngine();
    const results = engine.evaluate(pageOf([data(), formula("mg = MgO")]));
    expect(lineOf(results, "mg").sigma[0]).toBeCloseTo(0.2, 12);
    const node = engine.trace({ block: "r", name: "mg", index: 0 });
    const cell = (node === null ? [] : nodesOf(node)).find(({ kind }) => kind === "cell");
    expect(cell?.cell).toMatchObject({ rawSigma: "0.4", sigmaHeader: "2s MgO" });
  });

  it("does not happen to percent or to intervals: however 1σ of 0.2 is written, it is 0.2, in a fit's weights too", () => {
    const kinds = { "1 sigma": 0.2, "2 sigma": 0.4, "1 sigma relative %": 2, "2 sigma relative %": 4, "95 % interval": 1.959964 * 0.2 };
    for (const [as, written] of Object.entries(kinds)) {
      const text = `x,s,y,sy\n10,${written},1,0.1\n10,${written},2,0.1\n10,${written},4,0.1\n`;
      const columns = [
        { header: "x", name: "x", role: "quantity", unit: "1" },
        { header: "s", role: "uncertainty", of: "x", as },
      ];
      const results = freshEngine(text).evaluate(pageOf([{ id: "ch", kind: "data", source: { file: "ch.csv" }, columns }, formula("one = x\nm = wmean(x)")]));
      expect(lineOf(results, "one").sigma[0], as).toBeCloseTo(0.2, 6);
      expect(lineOf(results, "m").sigma[0], as).toBeCloseTo(0.2 / Math.sqrt(3), 6);
    }
  });
});

describe("an unknown σ", () => {
  const results = evaluate(
    data(),
    formula("ca = CaO\nratio = CaO / MgO\nmean_mg = mean(MgO)"),
    { ...fit({ x: "MgO", y: "CaO" }) },
    {
      id: "b",
      kind: "budget",
      start: { body: "BSE" },
      steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323 }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { body: "CI" } },
    },
  );
  const json = resultsJson(results) as {
    blocks: { r: { lines: { value: unknown[]; sigma: unknown[]; sigmaIs?: unknown }[] }; b: { solved: { sigma: unknown; sigmaIs?: string } } };
  };

  it("is not taken as 0: it is null in results, and no σ at all is made of it", () => {
    expect(json.blocks.r.lines[0]?.sigma).toEqual(new Array(9).fill(null));
    expect(lineOf(results, "ca").sigma.some((sigma) => sigma === 0)).toBe(false);
  });

  it("makes what leans on it a lower bound that says so, never a σ like any other", () => {
    const line = resultOf(results, "r", "formula").lines.find(({ name }) => name === "ratio");
    // By hand for S1: the ratio's σ from MgO alone.
    expect(line?.sigma[0]).toBeCloseTo(((2.6 / 24.1) * 0.2) / 24.1, 12);
    expect(Array.from(line?.lowerBound ?? [])).toEqual([1, 1, 1, 1, 1, 1, 0, 1, 0]);
    expect(json.blocks.b.solved.sigmaIs).toBe("lower bound");
  });

  it("leaves a sample out of a fit that weighs by σ, and the fit counts it", () => {
    const trendResult = resultOf(results, "t", "trend");
    expect(trendResult.leftOut).toMatchObject({ "without σ": 7 });
    expect(trendResult.problems.some(({ code }) => code === "without-sigma")).toBe(true);
    expect(trendResult.slope).toBeUndefined();
  });
});

describe("“<” turned into 0", () => {
  const results = evaluate(data(), formula("ca = CaO\nmean_ca = mean(CaO)\nleast_ca = least(CaO)\nratio = CaO / MgO\nsum = CaO + MgO"), {
    id: "p",
    kind: "plot",
    plot: "scatter",
    drawn: [{ data: "ch", x: "MgO", y: "CaO" }],
  });

  it("does not happen to the value: it has none, its state says why, and so has all that is made of it", () => {
    const json = resultsJson(results) as { blocks: { r: { lines: { value: unknown[]; state: string[] }[] } } };
    for (const i of [0, 3, 4]) expect([json.blocks.r.lines[i]?.value[6], json.blocks.r.lines[i]?.state[6]]).toEqual([null, "below detection"]);
  });

  it("does not happen to a mean, a minimum or a drawing: they leave it out and count it", () => {
    const counted = csv
      .trim()
      .split("\n")
      .slice(1)
      .map((row) => Number(row.split(",")[8] || Number.NaN))
      .filter(Number.isFinite);
    expect(counted).toHaveLength(7);
    expect(lineOf(results, "mean_ca").value[0]).toBeCloseTo(counted.reduce((a, b) => a + b, 0) / 7, 12);
    expect(lineOf(results, "least_ca").value[0]).toBe(2);
    expect(resultOf(results, "p", "plot")).toMatchObject({ drawn: 7, notDrawn: { "below detection": 1 } });
    expect(resultOf(results, "ch", "data").columns.find(({ name }) => name === "CaO")).toMatchObject({ n: 7, missing: 1, belowDetection: 1 });
  });
});

describe("iron counted twice or by half", () => {
  const given = "Sample,FeO,Fe2O3,FeOt,Metal\nA,8.34,2.06,10.1936,0\nB,8.34,,10.1936,1\nC,8,1,,2\n";
  const quantity = (header: string, species: string): object => ({ header, name: header, role: "quantity", species, unit: "wt%" });
  const table = (...columns: object[]): object => ({
    id: "ch",
    kind: "data",
    source: { file: "ch.csv" },
    columns: [{ header: "Sample", role: "sample" }, ...columns],
  });
  const iron = (...columns: object[]): ReturnType<typeof evaluate> =>
    freshEngine(given).evaluate(pageOf([table(...columns), formula("total = FeOt\nas_iron = Fe_total")]));
  // IUPAC 2021: Fe 55.845, O 15.999.
  const [feInFeO, feInFe2O3] = [55.845 / 71.844, (2 * 55.845) / (2 * 55.845 + 3 * 15.999)];

  it("does not happen to two oxides: they are added as iron, and a row that lacks one has no total, not a part of it", () => {
    const results = iron(quantity("FeO", "FeO"), quantity("Fe2O3", "Fe2O3"));
    const { value } = lineOf(results, "as_iron");
    expect(value[0]).toBeCloseTo(8.34 * feInFeO + 2.06 * feInFe2O3, 5);
    expect(value[1]).toBeNaN();
    expect(lineOf(results, "total").value[0]).toBeCloseTo(8.34 + (2.06 * feInFe2O3) / feInFeO, 5);
  });

  it("does not happen to a total beside its parts: it stands alone", () => {
    const { value } = lineOf(iron(quantity("FeO", "FeO"), quantity("Fe2O3", "Fe2O3"), quantity("FeOt", "FeOt")), "total");
    expect([value[0], value[1]]).toEqual([expect.closeTo(10.1936, 12), expect.closeTo(10.1936, 12)]);
    expect(value[2]).toBeCloseTo(8 + (1 * feInFe2O3) / feInFeO, 5);
  });

  it("does not happen to metal: it counts once, beside the oxides", () => {
    const { value } = lineOf(iron(quantity("FeO", "FeO"), quantity("Fe2O3", "Fe2O3"), quantity("Metal", "Fe_metal")), "as_iron");
    expect(value[2]).toBeCloseTo(8 * feInFeO + 1 * feInFe2O3 + 2, 5);
  });

  it("does not happen to a bare FeO: whether it is all the iron must be said", () => {
    const results = iron(quantity("FeO", "FeO"));
    expect(errorsOf(results, "r").map(({ code }) => code)).toEqual(["iron-untold", "iron-untold"]);
    for (const line of resultOf(results, "r", "formula").lines) expect(line.value.some(Number.isFinite)).toBe(false);
  });
});

describe("one mechanism presented as sufficient", () => {
  it("is ruled out by a second ratio, which the budget reports beside its target with the σ it misses by", () => {
    const results = evaluate({
      id: "b",
      kind: "budget",
      start: { body: "BSE" },
      steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323 }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { body: "CI" } },
      report: ["Mg / Si", "Al / Si"],
    });
    const [solved, second] = resultOf(results, "b", "budget").report;
    expect(solved?.end).toBeCloseTo(solved?.target ?? Number.NaN, 10);
    expect(second?.target).not.toBeNull();
    expect(Math.abs(second?.miss ?? 0)).toBeGreaterThan(1);
  });
});
