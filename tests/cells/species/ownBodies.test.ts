import { describe, expect, it } from "vitest";
import { createEngine, pageJsonSchema, readPageDocument, resultsJson, complete, type OwnBody, type PageDocument, type PageResults } from "../../../cells";
import { bodyLookup, elementsOfBody, listBodies, lookupBody, ownBodyFaults, ownBodyId, ownBodyIdSchema, speciesOfBody } from "../../../cells/species";

/** Round figures that no source has, so that every expected number below can be worked out by hand. */
const mantle: OwnBody = {
  name: "a mantle",
  source: "Whitcombe 2031, in preparation",
  fromMemory: false,
  values: [
    { species: "Mg", unit: "wt%", value: 22, sigma: 0.44 },
    { species: "Si", unit: "wt%", value: 20, sigma: 0.2 },
    { species: "Al2O3", unit: "wt%", value: 4 },
    { species: "La", unit: "µg/g", value: 0.6, sigma: 0 },
  ],
};
const remembered: OwnBody = { ...mantle, source: "From memory", fromMemory: true };

function page(over: Omit<Partial<PageDocument>, "blocks"> & { readonly blocks: readonly object[] }): PageDocument {
  return readPageDocument({ format: "cotectic-page/1", title: "", bodies: { M: "OWN_M_1" }, ownBodies: { OWN_M_1: mantle }, ...over });
}
function lines(results: PageResults, handle = "f"): Record<string, readonly [value: number | undefined, sigma: number | null | undefined]> {
  const result = results.blocks.get(handle);
  if (result?.kind !== "formula") throw new Error(`expected a formula block ${handle}`);
  return Object.fromEntries(result.lines.map((line) => [line.name, [line.value[0], line.sigma[0]]]));
}
const formula = (text: string) => ({ id: "f", kind: "formula", text });

describe("what an own body may say", () => {
  const value = { species: "MgO", unit: "wt%", value: 38 };
  it.each([
    ["no species", [value, { ...value, species: "Xx" }], /^Row 2, Xx: this is no element or oxide/u],
    ["a mineral", [{ ...value, species: "Mg2SiO4" }], /^Row 1, Mg2SiO4: this is no element or oxide/u],
    ["an element twice", [value, { species: "Mg", unit: "wt%", value: 22 }], /^Row 2, Mg: Mg is given in row 1 already, as MgO/u],
    [
      "iron in two oxides",
      [
        { ...value, species: "FeOt" },
        { ...value, species: "Fe2O3t" },
      ],
      /^Row 2, Fe2O3t: Fe is given in row 1 already.*as its total/u,
    ],
    ["a part of the iron", [{ ...value, species: "Fe_metal" }], /^Row 1, Fe_metal: this is a part of the iron/u],
    ["Fe2O3 that may be a part", [{ ...value, species: "Fe2O3" }], /^Row 1, Fe2O3: .*Write Fe2O3t/u],
    ["no unit", [{ ...value, unit: "stones" }], /^Row 1, MgO: "stones" is no unit of mass per mass/u],
    ["another kind of unit", [{ ...value, unit: "mol%" }], /^Row 1, MgO: "mol%" is no unit of mass per mass/u],
    ["less than nothing", [{ ...value, value: -1 }], /^Row 1, MgO: the value is -1/u],
    ["more than everything", [{ ...value, value: 101 }], /^Row 1, MgO: 101 wt% is more than the whole/u],
    ["no number", [{ ...value, value: Number.NaN }], /^Row 1, MgO: the value is no finite number/u],
    ["an endless number", [{ ...value, value: Number.POSITIVE_INFINITY }], /^Row 1, MgO: the value is no finite number/u],
    ["a negative σ", [{ ...value, sigma: -0.1 }], /^Row 1, MgO: the σ is -0.1/u],
    ["a σ that is no number", [{ ...value, sigma: Number.NaN }], /^Row 1, MgO: the σ is no finite number/u],
  ])("refuses %s, naming row and species", (_, values, says) => {
    expect(ownBodyFaults(values).map(({ text }) => text)).toEqual([expect.stringMatching(says)]);
    // What came past the check all the same is no body, rather than a wrong number.
    expect(bodyLookup({}, { OWN_X_1: { ...mantle, values } })("OWN_X_1")).toBeUndefined();
  });

  it("names the row that the caller means", () => {
    expect(ownBodyFaults([{ ...value, unit: "" }], (index) => index + 7)[0]).toMatchObject({ row: 7, text: expect.stringMatching(/^Row 7, MgO/u) });
  });

  it("has FeO and Fe as all the iron, like the built-in bodies", () => {
    expect(ownBodyFaults([{ ...value, species: "FeO" }])).toEqual([]);
    const iron = bodyLookup({}, { OWN_X_1: { ...mantle, values: [{ species: "FeO", unit: "wt%", value: 8 }] } })("OWN_X_1");
    if (iron === undefined) throw new Error("no body");
    expect(speciesOfBody(iron, "FeOt")?.value).toBe(0.08);
    expect(speciesOfBody(iron, "Fe_metal")).toBeUndefined();
  });

  it("is refused by the document in one line, with block, key and row", () => {
    const read = (own: unknown) => () => page({ ownBodies: { OWN_M_1: own } as PageDocument["ownBodies"], blocks: [] });
    expect(read({ ...mantle, values: [{ ...value, species: "Xx" }] })).toThrow(
      /^ownBodies\.OWN_M_1\.values\[0\]: Row 1, Xx: this is no element or oxide\. Write it as in Mg or MgO\.$/u,
    );
    expect(read({ ...mantle, values: [] })).toThrow(/at least one value/u);
    expect(read({ ...mantle, source: "?" })).toThrow(/citation or a DOI, or the words "from memory"/u);
    expect(read({ ...mantle, source: "from memory" })).toThrow(/fromMemory true/u);
    expect(read({ ...mantle, colour: "red" })).toThrow(/unknown key "colour"/u);
  });

  it("has an id that no built-in body has or can have", () => {
    expect(listBodies().filter(({ id }) => ownBodyIdSchema.safeParse(id).success)).toEqual([]);
    expect(() => page({ ownBodies: { CI_PLJ14: mantle }, blocks: [] })).toThrow(/OWN_/u);
    // Even past the check of the document, a built-in id means the built-in body.
    expect(bodyLookup({}, { CI_PLJ14: mantle })("CI_PLJ14")).toBe(lookupBody("CI_PLJ14"));
    expect(ownBodyId("Mantle", 2)).toBe("OWN_Mantle_2");
  });

  it("stands in the JSON Schema of the page document", () => {
    expect(JSON.stringify(pageJsonSchema())).toContain('"ownBodies"');
  });
});

describe("a page with a body of its own", () => {
  it("calculates with it in formulas, by alias and by id", () => {
    const results = createEngine().evaluate(
      page({ blocks: [formula("a = at(Mg / Si, M)\nb = at(Mg / Si, OWN_M_1)\nc = norm(at(La, M), M)\nd = at(Al / Si, M)")] }),
    );
    const { a, b, d } = lines(results);
    // 22/20, and relative errors of 2 % and 1 % in quadrature.
    expect(a?.[0]).toBeCloseTo(1.1, 14);
    expect(a?.[1]).toBeCloseTo(1.1 * Math.hypot(0.02, 0.01), 14);
    expect(b).toEqual(a);
    // 4 wt% of Al2O3 is 4 · 2 · 26.9815384 / (2 · 26.9815384 + 3 · 15.9994) wt% of Al (CIAAW 2021), its σ unknown.
    expect(d?.[0]).toBeCloseTo((4 * 2 * 26.9815384) / (2 * 26.9815384 + 3 * 15.9994) / 20, 5);
    expect(d?.[1]).not.toBeGreaterThan(1);
    expect(resultsJson(results)).toMatchObject({ bodies: { M: "OWN_M_1" }, blocks: { f: { bodies: { M: "OWN_M_1" } } } });
  });

  it("knows no body that it does not carry", () => {
    const { ownBodies: _, ...without } = page({ blocks: [formula("a = at(Mg / Si, M)")] });
    expect(createEngine().evaluate(without).blocks.get("f")?.problems).toMatchObject([{ code: "unknown-body" }]);
  });

  it("offers it in completion, with its source or that it is from memory", () => {
    const own = bodyLookup({}, { OWN_M_1: mantle, OWN_R_1: remembered });
    const { options } = complete({ table: null, bodies: own, lookup: () => undefined }, "norm(Mg, OWN", 12);
    expect(options.filter(({ label }) => label.startsWith("OWN_"))).toMatchObject([
      { label: "OWN_M_1", kind: "body", detail: "a mantle", help: "The group's own, from Whitcombe 2031, in preparation." },
      { label: "OWN_R_1", kind: "body", help: "The group's own, written down from memory." },
    ]);
  });

  it("traces a number to it, with source and whether it was checked", () => {
    const engine = createEngine();
    const asked = { block: "f", name: "a" };
    engine.evaluate(page({ blocks: [formula("a = at(Mg / Si, M)")] }));
    const node = engine.trace(asked)?.from.find(({ label }) => label.startsWith("Mg"));
    expect(node).toMatchObject({ kind: "body", value: 22, sigma: 0.44, unit: "wt%" });
    expect(node?.notes).toEqual(["a mantle: Whitcombe 2031, in preparation", "Checked: by the group that entered it, from the source it names."]);
    engine.evaluate(page({ ownBodies: { OWN_M_1: remembered }, blocks: [formula("a = at(Mg / Si, M)")] }));
    expect(engine.trace(asked)?.from[0]?.notes).toContain("Written down from memory; not checked against the source.");
  });

  const budget = (over: object) => ({ id: "b", kind: "budget", steps: [], report: ["Mg / Si"], ...over });
  it("starts budgets from it and aims at it", () => {
    const results = createEngine().evaluate(
      page({
        blocks: [
          budget({
            start: { body: "M" },
            steps: [{ do: "add", what: { element: "Si" }, amount: "solve" }],
            target: { expression: "Mg / Si", equals: { value: 1, basis: "mass" } },
          }),
          budget({ id: "c", start: { body: "BSE_MS95" }, target: { expression: "Mg / Si", equals: { body: "OWN_M_1" } } }),
        ],
      }),
    );
    const [b, c] = [results.blocks.get("b"), results.blocks.get("c")];
    if (b?.kind !== "budget" || c?.kind !== "budget") throw new Error("expected budgets");
    // 0.02 kg of silicon for each kg make 22 to 22; it is Mg − Si, so its σ² is theirs together.
    expect(b.solved?.value).toBeCloseTo(0.02, 10);
    expect(b.solved?.sigma).toBeCloseTo(Math.hypot(0.0044, 0.002), 10);
    expect(b.report[0]?.start).toBeCloseTo(1.1, 14);
    expect(b.report[0]?.end).toBeCloseTo(1, 12);
    expect(c.report[0]?.target).toBeCloseTo(1.1, 14);
    expect([b.bodiesUsed, c.bodiesUsed]).toEqual([{ M: "OWN_M_1" }, { BSE_MS95: "BSE_MS95", OWN_M_1: "OWN_M_1" }]);
    expect([...b.problems, ...c.problems].filter(({ severity }) => severity === "error")).toEqual([]);
  });

  it("counts a body that is named as a kind of body among the compilations of that kind", () => {
    const own = { ...mantle, name: "CI chondrite", values: mantle.values.map((each) => (each.species === "Mg" ? { ...each, value: 18 } : each)) };
    const results = createEngine().evaluate(
      page({
        bodies: { CI: "CI_PLJ14" },
        ownBodies: { OWN_M_1: own },
        blocks: [
          budget({
            start: { body: "BSE_MS95" },
            steps: [{ do: "add", what: { element: "Si" }, amount: "solve" }],
            target: { expression: "Mg / Si", equals: { body: "CI" } },
          }),
        ],
      }),
    );
    const b = results.blocks.get("b");
    if (b?.kind !== "budget") throw new Error("expected a budget");
    const mine = b.byCompilation.filter(({ bodies }) => bodies["CI"] === "OWN_M_1");
    expect(mine.length).toBeGreaterThan(0);
    for (const row of mine.filter(({ bodies }) => bodies["BSE_MS95"] === "BSE_MS95")) expect(row.solved).toBeTypeOf("number");
    expect(b.byCompilation.some(({ bodies }) => bodies["CI"] === "CI_MS95")).toBe(true);
  });

  it("draws it in plots and tells its distance from a trend", () => {
    const rows = [
      [10, 1, 10],
      [12, 1.4, 11],
      [14, 1.7, 12],
      [16, 2.2, 13],
      [18, 2.5, 14],
    ].map(([mg, al, si], i) => ({
      id: `r${i}`,
      cells: { Sample: `s${i}`, Mg: `${mg}`, Al: `${al}`, Si: `${si}`, "Mg σ": "0.2", "Al σ": "0.05", "Si σ": "0.1" },
    }));
    const column = (name: string) => [
      { name, role: "quantity", species: name, unit: "wt%" },
      { name: `${name} σ`, role: "uncertainty", of: name, as: "1 sigma" },
    ];
    const own = { ...mantle, values: [...mantle.values.filter(({ species }) => species !== "Al2O3"), { species: "Al", unit: "wt%", value: 2, sigma: 0.05 }] };
    const results = createEngine().evaluate(
      page({
        ownBodies: { OWN_M_1: own },
        blocks: [
          { id: "d", kind: "data", typed: rows, columns: [{ name: "Sample", role: "sample" }, ...["Mg", "Al", "Si"].flatMap(column)] },
          { id: "t", kind: "trend", data: "d", x: "Al / Si", y: "Mg / Si", method: "york" },
          { id: "p", kind: "plot", plot: "scatter", x: "Al / Si", y: "Mg / Si", drawn: [{ data: "d" }, { bodies: ["M", "OWN_M_1"], ellipses: "1 sigma" }] },
        ],
      }),
    );
    const [t, p] = [results.blocks.get("t"), results.blocks.get("p")];
    if (t?.kind !== "trend" || p?.kind !== "plot") throw new Error("expected a trend and a plot");
    expect([...t.problems, ...p.problems].filter(({ severity }) => severity === "error")).toEqual([]);
    const layer = p.layers.find(({ what }) => what === "bodies");
    if (layer?.what !== "bodies") throw new Error("expected a layer of bodies");
    expect(layer.bodies.map(({ name, compilation }) => [name, compilation])).toEqual([
      ["M", "OWN_M_1"],
      ["OWN_M_1", "OWN_M_1"],
    ]);
    expect(layer.bodies[0]).toMatchObject({ x: expect.closeTo(0.1, 12), y: expect.closeTo(1.1, 12) });
    expect(JSON.stringify(resultsJson(results))).toContain('"compilation":"OWN_M_1"');
    expect(t.fromBodies).toMatchObject([{ body: "M", distance: expect.any(Number), p: expect.any(Number) }]);
    expect(t.bodiesUsed).toEqual({ M: "OWN_M_1" });
  });

  it("moves with its content and stays the same object where nothing changed", () => {
    const engine = createEngine();
    const blocks = [formula("a = at(Mg / Si, M)")];
    const first = engine.evaluate(page({ blocks }));
    const again = engine.evaluate(page({ blocks }));
    expect(again.blocks.get("f")).toBe(first.blocks.get("f"));
    const richer = { ...mantle, values: mantle.values.map((each) => (each.species === "Mg" ? { ...each, value: 24 } : each)) };
    expect(lines(engine.evaluate(page({ ownBodies: { OWN_M_1: richer }, blocks })))["a"]?.[0]).toBeCloseTo(1.2, 14);
  });

  it("has its own bodies in the order of their ids, whoever put them there first", () => {
    const ids = (own: Record<string, OwnBody>) =>
      bodyLookup({}, own)
        .all.slice(-2)
        .map(({ id }) => id);
    expect(ids({ OWN_B_1: mantle, OWN_A_1: mantle })).toEqual(["OWN_A_1", "OWN_B_1"]);
    expect(bodyLookup({}).all).toBe(listBodies());
  });

  it("balances it by its elements", () => {
    const body = bodyLookup({}, { OWN_M_1: mantle })("OWN_M_1");
    if (body === undefined) throw new Error("no body");
    expect([...elementsOfBody(body).keys()]).toEqual(["Mg", "Si", "Al", "La"]);
    expect(elementsOfBody(body).get("Al")?.sigma).toBeNull();
    expect(elementsOfBody(body).get("La")?.sigma).toBe(0);
  });
});
