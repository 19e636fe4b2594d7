import { describe, expect, it } from "vitest";
import { createEngine, PAGE_FORMAT, readPageDocument, State, type PlotLayer, type PlotResult } from "@/cells";
import { resultsText } from "../../support/resultsText";
import { data, errorsOf, evaluate, lineOf, ratios, resultOf, trend } from "../page/pages";

type Of<What extends PlotLayer["what"]> = Extract<PlotLayer, { what: What }>;

function layer<What extends PlotLayer["what"]>(result: PlotResult, what: What): Of<What> {
  const found = result.layers.find((each): each is Of<What> => each.what === what);
  if (found === undefined) throw new Error(`no ${what} is drawn: ${result.problems.map(({ text }) => text).join(" ")}`);
  return found;
}

const plot = (drawn: readonly object[], more: object = {}): object => ({ id: "p", kind: "plot", plot: "scatter", drawn, ...more });
const samples = { data: "ch", x: "mg_si", y: "al_si" };

describe("samples on a scatter plot", () => {
  it("stand in table order with the σ and the error correlation of the formula", () => {
    const results = evaluate(data(), ratios, plot([samples]));
    const { points, rows, classes } = layer(resultOf(results, "p", "plot"), "samples");
    expect(rows).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9]);
    expect(classes[0]).toBe("CV");
    expect([...points.x]).toEqual([...lineOf(results, "mg_si").value]);
    expect([...points.sigmaY]).toEqual([...lineOf(results, "al_si").sigma]);
    const correlation = resultOf(results, "r", "formula").correlation[0];
    expect(correlation?.of).toEqual(["mg_si", "al_si"]);
    expect([...points.correlation]).toEqual([...(correlation?.value ?? [])]);
    // Mg/Si and Al/Si share the error of Si.
    expect(points.correlation[0]).toBeGreaterThan(0.2);
  });

  it("are left out and counted by state; those outside the condition are not counted", () => {
    const results = evaluate(
      data({ setAside: [{ row: 1, sample: "S1", reason: "weathered" }] }),
      ratios,
      plot([{ data: "ch", x: "mg_si", y: "Ca / Si", where: 'Group != "XX"' }]),
    );
    const result = resultOf(results, "p", "plot");
    const { points } = layer(result, "samples");
    expect(result.drawn).toBe(6);
    expect(result.notDrawn).toEqual({ "below detection": 1, "set aside": 1 });
    expect(points.x[8]).toBeNaN();
    expect(points.state[6]).toBe(State.belowDetection);
    expect(Number.isFinite(points.x[6])).toBe(false);
  });

  it("have σ that is not known where the source gives none, never 0", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", x: "Mg / Si", y: "Ca" }])), "p", "plot");
    expect(layer(result, "samples").points.sigmaY[0]).toBeNaN();
  });

  it.each([
    ["none", 0],
    ["1 sigma", 1],
    ["2 sigma", 2],
    ["95 %", 2.4477],
  ])("have ellipses of %s at Mahalanobis radius %d", (ellipses, radius) => {
    const result = resultOf(evaluate(data(), ratios, plot([{ ...samples, ellipses }])), "p", "plot");
    expect(layer(result, "samples").ellipses).toBeCloseTo(radius, 4);
  });

  it("bring another unit of the same kind to the axis' own", () => {
    const result = resultOf(
      evaluate(
        data(),
        plot([
          { data: "ch", x: "MgO", y: "SiO2" },
          { data: "ch", x: "as_ugg(MgO)", y: "SiO2" },
        ]),
      ),
      "p",
      "plot",
    );
    const [first, second] = result.layers;
    if (first?.what !== "samples" || second?.what !== "samples") throw new Error("two lines of samples are drawn");
    expect(result.x.unit).toBe("wt%");
    second.points.x.forEach((x, i) => expect(x).toBeCloseTo(first.points.x[i] ?? Number.NaN, 10));
    second.points.sigmaX.forEach((sigma) => expect(sigma).toBeCloseTo(0.2, 10));
  });

  it("out of the domain of a logarithmic axis are counted as that", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", x: "Mg / Si - 0.9 * (Si / Si)", y: "Al / Si" }], { xAxis: { scale: "log" } })), "p", "plot");
    const below = [...lineOf(evaluate(data(), ratios), "mg_si").value].filter((value) => value <= 0.9).length;
    expect(below).toBeGreaterThan(0);
    expect(result.notDrawn).toEqual({ "out of domain": below });
    expect(result.problems).toMatchObject([{ code: "not-on-log-axis", severity: "warning", field: "drawn[0]" }]);
    expect(result.problems[0]?.text).toContain(`${below} ${below === 1 ? "sample of ch has" : "samples of ch have"} a value that is not above zero`);
  });
});

describe("what cannot stand on an axis", () => {
  const atomic = { ...ratios, text: `${ratios.text}\nby_atoms = atoms(Mg) / atoms(Si)` };

  it("is an error of its own line that explains itself, and the others are drawn", () => {
    const results = evaluate(data(), atomic, plot([samples, { data: "ch", x: "by_atoms", y: "al_si" }]));
    const [problem] = errorsOf(results, "p");
    expect(problem).toMatchObject({ code: "basis-mismatch", field: "drawn[1].x" });
    expect(problem?.text).toContain("by_atoms is a ratio by atoms, and this axis shows mg_si, a ratio by mass");
    expect(problem?.text).toContain("1.7308 by mass");
    expect(resultOf(results, "p", "plot").layers).toHaveLength(1);
  });

  it("is a normalised ratio beside one that is not", () => {
    const results = evaluate(data(), ratios, plot([samples, { data: "ch", x: "mg_si", y: "norm(al_si, CI)" }]));
    expect(errorsOf(results, "p")).toMatchObject([{ code: "basis-mismatch", field: "drawn[1].y" }]);
  });

  it("is a mass fraction beside a ratio", () => {
    const results = evaluate(data(), ratios, plot([samples, { data: "ch", x: "MgO", y: "al_si" }]));
    expect(errorsOf(results, "p")).toMatchObject([{ code: "unit-mismatch", field: "drawn[1].x" }]);
  });

  it("is a trend in other quantities than the plot's", () => {
    const other = { ...trend("t", "CV"), y: "Ca / Si", method: "ordinary least squares" };
    const results = evaluate(data(), ratios, other, plot([samples, { trend: "t" }]));
    const [problem] = errorsOf(results, "p");
    expect(problem).toMatchObject({ code: "axes-differ", field: "drawn[1].trend" });
    expect(problem?.text).toContain("t is fitted with mg_si across and Ca/Si upwards; this plot shows mg_si across and al_si upwards");
  });

  it("is a trend by mass on axes by atoms", () => {
    const results = evaluate(data(), atomic, trend("t", "CV"), plot([{ data: "ch", x: "by_atoms", y: "al_si" }, { trend: "t" }]));
    expect(errorsOf(results, "p")).toMatchObject([{ code: "basis-mismatch", field: "drawn[1].trend" }]);
  });

  it("is a trend the other way round", () => {
    const results = evaluate(data(), ratios, trend("t", "CV"), plot([{ data: "ch", x: "al_si", y: "mg_si" }, { trend: "t" }]));
    expect(errorsOf(results, "p")[0]?.text).toContain("Exchange the axes of the plot");
  });

  it("leaves the axis to the next line that has one, where the first is faulty", () => {
    const results = evaluate(data(), ratios, plot([{ data: "ch", x: "Mgg", y: "al_si" }, samples]));
    const result = resultOf(results, "p", "plot");
    expect(errorsOf(results, "p")).toMatchObject([{ code: "unknown-name", field: "drawn[0].x" }]);
    expect(result.x).toEqual({ expression: "mg_si", label: "mg_si", unit: "1", basis: "mass" });
    expect(result.drawn).toBe(9);
  });

  it("is nothing at all where nothing says what the axes show", () => {
    const results = evaluate(data(), plot([{ bodies: ["CI"] }]));
    expect(errorsOf(results, "p").map(({ field }) => field)).toEqual(["x", "y"]);
  });
});

describe("trends on a plot", () => {
  it("pass through their own line, beyond what is drawn, with a band that is narrowest among the samples", () => {
    const results = evaluate(data(), ratios, trend("t", "CV"), plot([samples, { trend: "t" }]));
    const result = resultOf(results, "p", "plot");
    const { line, band, range } = layer(result, "trend");
    const fit = resultOf(results, "t", "trend");
    line.x.forEach((x, i) => expect(line.y[i]).toBeCloseTo((fit.intercept?.value ?? 0) + (fit.slope?.value ?? 0) * x, 12));
    const xs = [...layer(result, "samples").points.x];
    expect(line.x[0]).toBeLessThan(Math.min(...xs));
    expect(line.x[line.x.length - 1]).toBeGreaterThan(Math.max(...xs));
    expect(range).toEqual([Math.min(...fit.points.map(({ x }) => x)), Math.max(...fit.points.map(({ x }) => x))]);
    if (band === undefined) throw new Error("the band is drawn");
    const width = [...band.upper].map((upper, i) => upper - (band.lower[i] ?? 0));
    const narrowest = line.x[width.indexOf(Math.min(...width))] ?? 0;
    expect(narrowest).toBeGreaterThan(range[0]);
    expect(narrowest).toBeLessThan(range[1]);
    const at = band.x.findIndex((x) => x >= range[0]);
    const x = band.x[at] ?? 0;
    const { slope, intercept, covariance = 0 } = fit;
    const variance = (intercept?.sigma ?? 0) ** 2 + 2 * x * covariance + x * x * (slope?.sigma ?? 0) ** 2;
    expect(width[at]).toBeCloseTo(2 * 1.959964 * Math.sqrt(variance), 6);
  });

  it("are known by what they mean, not by how it is written", () => {
    const results = evaluate(data(), ratios, { ...trend("t", "CV"), x: "(Mg/Si)", y: "Al / Si" }, plot([samples, { trend: "t", band: false }]));
    expect(errorsOf(results, "p")).toEqual([]);
    expect(layer(resultOf(results, "p", "plot"), "trend").band).toBeUndefined();
  });

  it("give the axes where nothing else does", () => {
    const results = evaluate(data(), ratios, trend("t", "CV"), plot([{ trend: "t" }, { bodies: ["CI"] }]));
    expect(errorsOf(results, "p")).toEqual([]);
    expect(resultOf(results, "p", "plot").x.expression).toBe("mg_si");
    expect(layer(resultOf(results, "p", "plot"), "bodies").bodies).toHaveLength(1);
  });

  it("cross where the trend says, in a closed curve of 95 %", () => {
    const results = evaluate(
      data({ setAside: [{ row: 8, sample: "S8", reason: "weathered" }], correlations: [{ of: ["MgO", "SiO2"], value: 0.5 }] }),
      ratios,
      trend("t", "CV", { crossWith: "t2" }),
      trend("t2", "CO"),
      plot([{ crossing: "t" }, samples]),
    );
    const { crossing } = resultOf(results, "t", "trend");
    const drawn = layer(resultOf(results, "p", "plot"), "crossing");
    expect(crossing?.region).toBe("ellipse");
    expect(drawn.trends).toEqual(["t", "t2"]);
    expect([drawn.x, drawn.y, drawn.sigmaX]).toEqual([crossing?.x.value, crossing?.y.value, crossing?.x.sigma]);
    const { x, y } = drawn.ellipse;
    expect([x[0], y[0]]).toEqual([x[x.length - 1], y[y.length - 1]]);
    const [sx, sy] = [crossing?.x.sigma ?? 0, crossing?.y.sigma ?? 0];
    const rho = (crossing?.covariance ?? 0) / (sx * sy);
    x.forEach((value, i) => {
      const [u, v] = [(value - drawn.x) / sx, ((y[i] ?? 0) - drawn.y) / sy];
      expect((u * u - 2 * rho * u * v + v * v) / (1 - rho * rho)).toBeCloseTo(5.991465, 5);
    });
  });

  it("that have no line or no crossing are not drawn, and the plot says which", () => {
    const results = evaluate(data(), ratios, trend("t", "XX"), plot([samples, { trend: "t" }, { crossing: "t" }]));
    const result = resultOf(results, "p", "plot");
    expect(result.layers).toHaveLength(1);
    expect(result.problems.map(({ code, severity }) => [code, severity])).toEqual(
      expect.arrayContaining([
        ["no-line", "warning"],
        ["no-crossing", "warning"],
      ]),
    );
  });
});

describe("bodies and paths on a plot", () => {
  it("stand where the axes' expressions put them, with the σ and correlation of their source", () => {
    const result = resultOf(evaluate(data(), ratios, plot([samples, { bodies: ["CI"], ellipses: "2 sigma" }])), "p", "plot");
    const [ci] = layer(result, "bodies").bodies;
    // Palme, Lodders & Jones 2014: Mg 9.54(38), Si 10.70(32), Al 0.840(50) wt%.
    expect(ci).toMatchObject({ name: "CI", compilation: "CI_PLJ14" });
    expect(ci?.x).toBeCloseTo(9.54 / 10.7, 10);
    expect(ci?.sigmaX).toBeCloseTo((9.54 / 10.7) * Math.sqrt(0.04 ** 2 + 0.03 ** 2), 10);
    expect(ci?.correlation).toBeCloseTo(0.03 ** 2 / (Math.sqrt(0.04 ** 2 + 0.03 ** 2) * Math.sqrt(0.06 ** 2 + 0.03 ** 2)), 10);
    expect(ci?.ellipse?.x).toHaveLength(65);
    expect(result.bodiesUsed).toEqual({ CI: "CI_PLJ14" });
  });

  it("have a σ of null where the source gives none, and no ellipse; the plot says so", () => {
    const result = resultOf(evaluate(data(), ratios, plot([samples, { bodies: ["BSE"] }])), "p", "plot");
    const [bse] = layer(result, "bodies").bodies;
    expect(bse).toMatchObject({ sigmaX: null, sigmaY: null });
    expect(bse?.ellipse).toBeUndefined();
    expect(result.problems).toMatchObject([{ code: "sigma-unknown", severity: "note", field: "drawn[1].bodies" }]);
  });

  it("that normalise themselves are exactly 1", () => {
    const result = resultOf(evaluate(data(), plot([{ data: "ch", x: "norm(Mg / Si, CI)", y: "norm(Al / Si, CI)" }, { bodies: ["CI"] }])), "p", "plot");
    expect(layer(result, "bodies").bodies[0]).toMatchObject({ x: 1, y: 1, sigmaX: 0, sigmaY: 0 });
    expect(result.x.label).toBe("norm(Mg/Si, CI), normalised to CI (CI_PLJ14)");
  });

  it("that nobody knows are an error that names them; those that lack a species say which", () => {
    const results = evaluate(data(), ratios, plot([samples, { bodies: ["NOWHERE", "forsterite", "quartz", "SUN_A09"] }]));
    const result = resultOf(results, "p", "plot");
    expect(errorsOf(results, "p")).toMatchObject([{ code: "unknown-body", field: "drawn[1].bodies" }]);
    expect(errorsOf(results, "p")[0]?.text).toContain("NOWHERE");
    expect(layer(result, "bodies").bodies.map(({ name }) => name)).toContain("forsterite");
    const lacking = resultOf(evaluate(data(), plot([{ data: "ch", x: "Mg / Al", y: "Al / Si" }, { bodies: ["forsterite"] }])), "p", "plot");
    expect(lacking.problems).toMatchObject([{ code: "not-on-body", severity: "warning" }]);
    expect(lacking.problems[0]?.text).toContain("forsterite");
  });

  it("draw a budget's path to its solved end", () => {
    const budget = {
      id: "b",
      kind: "budget",
      start: { body: "BSE" },
      steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
      target: { expression: "Mg / Si", equals: { body: "CI" } },
      report: ["Mg / Si", "Al / Si"],
    };
    const results = evaluate(data(), ratios, budget, plot([samples, { budget: "b" }]));
    const path = layer(resultOf(results, "p", "plot"), "path");
    const { report } = resultOf(results, "b", "budget");
    expect(path.end?.x).toBeCloseTo(report[0]?.end ?? Number.NaN, 10);
    expect(path.end?.y).toBeCloseTo(report[1]?.end ?? Number.NaN, 10);
    expect(path.ticks.length).toBeGreaterThan(1);
    expect(path.line.x[0]).toBeCloseTo(report[0]?.start ?? Number.NaN, 10);
    expect(resultOf(results, "p", "plot").bodiesUsed).toEqual({ BSE: "BSE_MS95", CI: "CI_PLJ14" });
  });

  it("keep the order of the list, annotations among them, and leave out what is hidden", () => {
    const drawn = [{ annotation: "fine", x: 1, y: 0.1 }, { bodies: ["CI"] }, { ...samples, hidden: true }, samples, { trend: "t" }];
    const result = resultOf(evaluate(data(), ratios, trend("t", "CV"), plot(drawn)), "p", "plot");
    expect(result.layers.map(({ what, drawn: place }) => [what, place])).toEqual([
      ["annotation", 0],
      ["bodies", 1],
      ["samples", 3],
      ["trend", 4],
    ]);
    expect(result.drawn).toBe(9);
  });
});

describe("a plot without samples", () => {
  const budget = {
    id: "b",
    kind: "budget",
    start: { body: "BSE" },
    steps: [{ do: "share with metal", species: "Si", metalFraction: { value: 0.323, sigma: 0 }, amount: "solve" }],
    target: { expression: "Mg / Si", equals: { body: "CI" } },
  };
  const plot = (x: string): object => ({ id: "p", kind: "plot", plot: "scatter", x, y: "Al / Si", drawn: [{ budget: "b" }, { bodies: ["CI", "BSE"] }] });

  it("stands on what its bodies are made of", () => {
    const results = evaluate(budget, plot("Mg / Si"));
    const result = resultOf(results, "p", "plot");
    expect(errorsOf(results, "p")).toEqual([]);
    expect(result.x).toMatchObject({ label: "Mg/Si", unit: "1", basis: "mass" });
    expect(result.layers.map(({ what }) => what)).toEqual(["path", "bodies"]);
  });

  it("draws mixing in two ratios as the hyperbola it is, and no chord", () => {
    const other = { "Mg wt%": 20, "Si wt%": 15, "Al wt%": 0.4, "Ca wt%": 6 };
    const mixing = { id: "b", kind: "budget", start: { body: "CI" }, steps: [{ do: "mix", what: { composition: other }, amount: { from: 0, to: 1 } }] };
    const results = evaluate(mixing, { id: "p", kind: "plot", plot: "scatter", x: "Mg / Si", y: "Ca / Al", drawn: [{ budget: "b" }], xAxis: { scale: "log" } });
    expect(errorsOf(results, "p")).toEqual([]);
    const { line, ticks } = layer(resultOf(results, "p", "plot"), "path");
    // By hand, from CI's mass fractions (Palme, Lodders & Jones 2014) and those above.
    const [ci, end] = [
      { Mg: 9.54, Si: 10.7, Al: 0.84, Ca: 0.911 },
      { Mg: 20, Si: 15, Al: 0.4, Ca: 6 },
    ];
    const mixed = (f: number): readonly [number, number] => {
      const of = (element: keyof typeof ci): number => (1 - f) * ci[element] + f * end[element];
      return [of("Mg") / of("Si"), of("Ca") / of("Al")];
    };
    expect(line.x).toHaveLength(101);
    line.x.forEach((x, i) => {
      expect(x).toBeCloseTo(mixed(i / 100)[0], 10);
      expect(line.y[i]).toBeCloseTo(mixed(i / 100)[1], 10);
    });
    // Langmuir et al. 1978, eq. 1: four places of the curve fix A x + B x y + C y + D = 0, and a straight line has B = 0.
    const [x0 = 0, y0 = 0, x1 = 0, y1 = 0] = [line.x[0], line.y[0], line.x[100], line.y[100]];
    const chord = y0 + ((y1 - y0) * ((line.x[50] ?? 0) - x0)) / (x1 - x0);
    expect(Math.abs((line.y[50] ?? 0) - chord) / (y1 - y0)).toBeGreaterThan(0.1);
    for (const tick of ticks) {
      const f = Number.parseFloat(tick.label) / 100;
      expect([tick.x, tick.y]).toEqual(mixed(f).map((value) => expect.closeTo(value, 10)));
    }
  });

  it("still says at the character what nothing has", () => {
    const results = evaluate(budget, plot("Mg / Unobtainium"));
    expect(errorsOf(results, "p")[0]).toMatchObject({ field: "x" });
  });
});

describe("arrays that a plot shares with its formula", () => {
  it("stay what they were when a triangle of the same numbers leaves some out", () => {
    const rows = Array.from({ length: 1500 }, (_, i) => `S-${i},${30 + (i % 7)},${20 + (i % 5)},${i % 3 === 0 ? -1 : 10}`);
    const engine = createEngine();
    engine.setSource("t.csv", new TextEncoder().encode(`Sample,a (wt%),b (wt%),c (wt%)\n${rows.join("\n")}\n`));
    const columns = ["a", "b", "c"].map((name) => ({ header: `${name} (wt%)`, name, role: "quantity" as const, unit: "wt%" }));
    const evaluate = (withTriangle: boolean) =>
      engine.evaluate(
        readPageDocument({
          format: PAGE_FORMAT,
          title: "",
          blocks: [
            { id: "d", kind: "data", source: { file: "t.csv" }, columns: [{ header: "Sample", role: "sample" }, ...columns] },
            { id: "f", kind: "formula", data: "d", text: "x = a / (a + b + c)\ny = b / (a + b + c)" },
            { id: "p", kind: "plot", plot: "scatter", drawn: [{ data: "d", x: "x", y: "y" }] },
            ...(withTriangle ? [{ id: "q", kind: "plot" as const, plot: "ternary" as const, drawn: [{ data: "d", x: "a", y: "b", z: "c" }] }] : []),
          ],
        }),
      );
    const alone = resultsText(evaluate(false));
    const triangle = evaluate(true).blocks.get("q");
    expect(triangle?.problems.map((p) => p.code)).toContain("outside-triangle");
    expect(resultsText(evaluate(false))).toBe(alone);
  });
});
