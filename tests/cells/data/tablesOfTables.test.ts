import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { DataBlock } from "../../../cells/page/schema";
import { resolveSpecies } from "../../../cells/species";
import { seed } from "../../support/seed";
import { DataPage, errorsOf, problemOf, problemsOf, quantity, sample, sigmasOf, statesOf, tableOf, valuesOf, words, wtpct } from "./blocks";

const group = { header: "Group", role: "class" } as const;
const sigma = (of: string, header = `s ${of}`) => ({ header, role: "uncertainty", of, as: "1 sigma" }) as const;

/** Two papers: one in wt%, one in µg/g under other names, with everything a cell can be. */
function twoPapers(): DataPage {
  const page = new DataPage();
  page.source("ch", "Sample,Group,MgO,s MgO,T\nA,CV,37.1,0.4,20\nB,CV,<0.2,,21\n", {
    columns: [sample, group, wtpct("MgO"), sigma("MgO"), { header: "T", role: "quantity", unit: "°C" }],
    amendments: [{ row: 1, sample: "A", column: "MgO", was: "37.1", value: "37.2", reason: "x" }],
    setAside: [{ row: 2, sample: "B", reason: "weathered" }],
  });
  page.source("ro", "Name,Rock,magnesia,Lab\nC,dunite,470000,Bern\nD,dunite,n.d.,Bern\n", {
    columns: [
      { header: "Name", role: "sample" },
      { header: "Rock", role: "class" },
      { header: "magnesia", role: "quantity", species: "MgO", unit: "µg/g" },
      { header: "Lab", role: "text" },
    ],
    assumed: [{ column: "magnesia", relative: 0.01, reason: "x" }],
  });
  return page;
}

describe("a stack", () => {
  it("puts columns of one species under each other, and keeps values, σ, states, marks, texts and origins", () => {
    const result = twoPapers().add({ id: "all", kind: "data", stack: ["ch", "ro"] });
    const table = tableOf(result);
    expect(errorsOf(result)).toEqual([]);
    expect(table.rowIds).toEqual(["ch.1", "ch.2", "ro.1", "ro.2"]);
    expect(table.origins).toEqual([[{ table: "ch", row: 1 }], [{ table: "ch", row: 2 }], [{ table: "ro", row: 1 }], [{ table: "ro", row: 2 }]]);
    expect(table.samples).toEqual(["A", "B", "C", "D"]);
    expect(table.classes).toEqual(["CV", "CV", "dunite", "dunite"]);
    expect(words(result, "Group")).toEqual(["CV", "CV", "dunite", "dunite"]);
    expect(words(result, "table")).toEqual(["ch", "ch", "ro", "ro"]);
    expect(words(result, "Lab")).toEqual(["", "", "Bern", "Bern"]);
    expect(quantity(result, "MgO").unit.symbol).toBe("wt%");
    expect(valuesOf(result, "MgO").map((value) => value?.toFixed(6))).toEqual(["37.200000", undefined, "47.000000", undefined]);
    expect(sigmasOf(result, "MgO").map((value) => value?.toFixed(6))).toEqual(["0.400000", undefined, "0.470000", undefined]);
    expect(statesOf(result, "MgO")).toEqual(["present", "below detection", "present", "missing"]);
    expect(quantity(result, "MgO").limit[1]).toBe(0.2 / 100);
    expect([...quantity(result, "MgO").assumed]).toEqual([0, 0, 1, 0]);
    expect([...quantity(result, "MgO").amended]).toEqual([1, 0, 0, 0]);
    expect(quantity(result, "MgO").raw).toEqual(["37.1", "<0.2", "470000", "n.d."]);
    expect(statesOf(result, "T")).toEqual(["present", "present", "missing", "missing"]);
    expect([...table.setAside]).toEqual([0, 1, 0, 0]);
    expect(result).toMatchObject({ samples: 3, setAside: 1, amended: 1 });
  });

  it("carries every number to the bit, whatever the tables hold", () => {
    const cell = fc.oneof(
      fc.double({ min: 0.001, max: 99, noNaN: true }).map((value) => value.toPrecision(6)),
      fc.constantFrom("", "<0.1", "n.d."),
    );
    const rows = fc.array(fc.tuple(cell, fc.constantFrom("", "0.3", "0.01")), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(fc.array(rows, { minLength: 1, maxLength: 4 }), (tables) => {
        const page = new DataPage();
        const parts = tables.map((lines, i) =>
          page.source(`t${i}`, `Sample,x${i},s\n${lines.map(([value, s], j) => `S${j},${value},${s}`).join("\n")}\n`, {
            columns: [
              sample,
              { header: `x${i}`, role: "quantity", species: "MgO", unit: i % 2 === 0 ? "wt%" : "µg/g" },
              { header: "s", role: "uncertainty", of: `x${i}`, as: "1 sigma" },
            ],
          }),
        );
        const stack = page.add({ id: "all", kind: "data", stack: tables.map((_, i) => `t${i}`) });
        const whole = quantity(stack, "x0");
        for (const key of ["value", "sigma", "limit"] as const) expect([...whole[key]]).toEqual(parts.flatMap((part, i) => [...quantity(part, `x${i}`)[key]]));
        expect([...whole.state]).toEqual(parts.flatMap((part, i) => [...quantity(part, `x${i}`).state]));
        expect(new Set(tableOf(stack).rowIds).size).toBe(tableOf(stack).rows);
        expect(tableOf(stack).origins.flat()).toEqual(parts.flatMap((part, i) => tableOf(part).rowIds.map((row) => ({ table: `t${i}`, row }))));
      }),
      { seed, numRuns: 60 },
    );
  });

  it("of stacks keeps the sources' rows and tables", () => {
    const page = twoPapers();
    page.add({ id: "all", kind: "data", stack: ["ch", "ro"] });
    const result = page.add({ id: "more", kind: "data", stack: ["all", "ch"] });
    expect(words(result, "table")).toEqual(["ch", "ch", "ro", "ro", "ch", "ch"]);
    expect(quantity(result, "MgO").sources).toEqual([
      { table: "ch", column: "MgO" },
      { table: "ro", column: "magnesia" },
      { table: "ch", column: "MgO" },
    ]);
    expect(tableOf(result).rowIds).toEqual(["ch.1", "ch.2", "ro.1", "ro.2", "ch.1#2", "ch.2#2"]);
    expect(tableOf(result).origins[4]).toEqual([{ table: "ch", row: 1 }]);
    expect(problemOf(result, "rows-twice").text).toContain("2 rows of ch come in by more than one");
  });

  it("takes a table that is listed twice once, and says so", () => {
    const result = twoPapers().add({ id: "all", kind: "data", stack: ["ch", "ro", "ch"] });
    expect(problemOf(result, "table-twice")).toMatchObject({ severity: "error", field: "stack[2]" });
    expect(tableOf(result).rowIds).toEqual(["ch.1", "ch.2", "ro.1", "ro.2"]);
  });

  it("does not put mass and atomic ratios, or what has no common unit, under one another", () => {
    const page = new DataPage();
    const ratio = { header: "r", role: "quantity", unit: "1" } as const;
    page.source("a", "Sample,r,MgO\nA,1,2\n", { columns: [sample, { ...ratio, basis: "mass" }, wtpct("MgO")] });
    page.source("b", "Sample,r,MgO\nB,1,2\n", { columns: [sample, { ...ratio, basis: "atoms" }, { ...wtpct("MgO"), unit: "mol%" }] });
    const result = page.add({ id: "all", kind: "data", stack: ["a", "b"] });
    expect(tableOf(result).columns.map((column) => column.name)).toEqual(["Sample", "table", "r", "MgO", "r_b", "MgO_b"]);
    expect(problemsOf(result, "column-renamed").map((problem) => problem.text)).toEqual([
      "The column r of b is called r_b here, since one is by mass, the other by atoms.",
      "The column MgO of b is called MgO_b here, since wt% and mol% cannot be brought to one unit.",
    ]);
  });

  it("carries correlations to the rows they were declared for", () => {
    const page = new DataPage();
    page.source("a", "Sample,x,y\nA,1,2\n", { columns: [sample, wtpct("MgO", "x"), wtpct("SiO2", "y")], correlations: [{ of: ["SiO2", "MgO"], value: 0.5 }] });
    page.source("b", "Sample,x,y\nB,1,2\n", { columns: [sample, wtpct("MgO", "x"), wtpct("SiO2", "y")] });
    const { correlations } = tableOf(page.add({ id: "all", kind: "data", stack: ["a", "b"] }));
    expect(correlations.map(({ of, value }) => [[...of], [...value]])).toEqual([
      [
        ["MgO", "SiO2"],
        [0.5, 0],
      ],
    ]);
  });

  it("lets rows be set aside by their identity, and σ be assumed", () => {
    const result = twoPapers().add({
      id: "all",
      kind: "data",
      stack: ["ch", "ro"],
      setAside: [{ row: "ro.1", sample: "C", reason: "x" }],
      assumed: [{ column: "T", absolute: 1, reason: "x" }],
    });
    expect([...tableOf(result).setAside]).toEqual([0, 1, 1, 0]);
    expect(sigmasOf(result, "T").slice(0, 2)).toEqual([1, 1]);
  });

  it("refuses amendments and columns of its own, and says where they belong", () => {
    const result = twoPapers().add({
      id: "all",
      kind: "data",
      stack: ["ch", "ro"],
      columns: [sample],
      amendments: [{ row: "ch.1", sample: "A", column: "MgO", was: "37.2", value: "1", reason: "x" }],
    });
    expect(errorsOf(result)).toEqual(["columns-of-tables", "amendments-of-tables"]);
    expect(valuesOf(result, "MgO")[0]).toBeCloseTo(37.2, 12);
  });

  it("of what is not there has no table", () => {
    const page = twoPapers();
    expect(problemOf(page.add({ id: "s", kind: "data", stack: ["ch", "gone"] }), "no-such-block")).toMatchObject({ severity: "error", field: "stack[1]" });
    page.add({ id: "bad", kind: "data", source: { file: "bad.csv" } });
    const result = page.add({ id: "s", kind: "data", stack: ["ch", "bad"] });
    expect(result.table).toBeUndefined();
    expect(problemOf(result, "no-table").text).toContain("See what bad says");
  });

  it("says every substitution of its tables", () => {
    const page = new DataPage();
    for (const [id, fraction] of [
      ["a", 0.5],
      ["b", 0.3],
    ] as const)
      page.source(id, "Sample,MgO\nA,<2\n", { columns: [sample, wtpct("MgO")], substitute: { fraction, reason: `reason of ${id}` } });
    const result = page.add({ id: "all", kind: "data", stack: ["a", "b"] });
    expect(valuesOf(result, "MgO")).toEqual([1, 0.6]);
    expect(tableOf(result).substitution).toEqual({ fraction: 0.5, reason: "reason of a (in a); in b they count as 0.3 of it: reason of b" });
  });

  it("iron counted twice or by half: a total of one table and the parts of another are each counted once", () => {
    const page = new DataPage();
    page.source("a", "Sample,FeO*\nA,10\n", { columns: [sample, { header: "FeO*", role: "quantity", species: "FeOt", unit: "wt%" }] });
    page.source("b", "Sample,FeO,Fe2O3\nB,8.34,2.06\n", { columns: [sample, wtpct("FeO"), wtpct("Fe2O3")] });
    const result = page.add({ id: "all", kind: "data", stack: ["a", "b"] });
    const iron = resolveSpecies(tableOf(result), "FeOt");
    if (iron?.ok !== true) throw new Error("expected iron");
    const total = (row: number): number =>
      (iron.candidates[iron.choice[row] ?? 0]?.terms ?? []).reduce((sum, term) => sum + term.factor * (term.column.value[row] ?? Number.NaN), 0) * 100;
    expect(total(0)).toBeCloseTo(10, 12);
    // check-values.json: FeOt of 8.34 wt% FeO with 2.06 wt% Fe2O3.
    expect(total(1)).toBeCloseTo(10.193609122846569, 9);
    expect(problemsOf(result, "iron-untold")).toEqual([]);
  });

  it("iron counted twice or by half: a bare FeO of one table beside the parts of another is said", () => {
    const page = new DataPage();
    page.source("a", "Sample,FeO\nA,10\n", { columns: [sample, wtpct("FeO")] });
    page.source("b", "Sample,FeO,Fe2O3\nB,8.34,2.06\n", { columns: [sample, wtpct("FeO"), wtpct("Fe2O3")] });
    expect(problemOf(page.add({ id: "all", kind: "data", stack: ["a", "b"] }), "iron-untold").text).toContain("a gives its iron in FeO alone");
  });
});

describe("a join", () => {
  function halves(more: { a?: string; b?: string } = {}): DataPage {
    const page = new DataPage();
    page.source("a", more.a ?? "Sample,Group,MgO\nA,CV,37\nB,CV,38\n", { columns: [sample, group, wtpct("MgO")] });
    page.source("b", more.b ?? "Sample,Group,Ir,MgO\nB,CK,600,39\nC,CK,700,40\n", { columns: [sample, group, { ...wtpct("Ir"), unit: "ng/g" }, wtpct("MgO")] });
    return page;
  }
  const join: DataBlock = { id: "j", kind: "data", join: ["a", "b"] };

  it("puts tables beside each other on the sample, with every origin", () => {
    const result = halves().add(join);
    const table = tableOf(result);
    expect(table.samples).toEqual(["A", "B", "C"]);
    expect(table.rowIds).toEqual(["a.1", "a.2", "b.2"]);
    expect(table.origins).toEqual([
      [{ table: "a", row: 1 }],
      [
        { table: "a", row: 2 },
        { table: "b", row: 1 },
      ],
      [{ table: "b", row: 2 }],
    ]);
    expect(valuesOf(result, "MgO")).toEqual([37, 38, null]);
    expect(valuesOf(result, "MgO_b")).toEqual([null, 39, 40]);
    expect(valuesOf(result, "Ir").map((value) => value?.toFixed(6))).toEqual([undefined, "600.000000", "700.000000"]);
    expect(quantity(result, "MgO_b").sources).toEqual([{ table: "b", column: "MgO" }]);
    expect(problemsOf(result, "join-unmatched")).toHaveLength(2);
    expect(problemOf(result, "class-differs").text).toContain("B (CV or CK)");
    expect(table.classes).toEqual(["CV", "CV", "CK"]);
  });

  it("refuses a sample that one table has twice, and rows without a name", () => {
    const twice = halves({ b: "Sample,Group,Ir,MgO\nB,CK,600,39\nB,CK,700,40\n" }).add(join);
    expect(twice.table).toBeUndefined();
    expect(problemOf(twice, "join-ambiguous")).toMatchObject({ severity: "error" });
    expect(problemOf(twice, "join-ambiguous").text).toContain('b has the sample "B" twice, in rows 1 and 2');
    expect(problemOf(halves({ a: "Sample,Group,MgO\n,CV,37\n" }).add(join), "join-nameless").text).toContain("Row 1 of a");
  });

  it("joins what is left when one of two is set aside, or when replicates are merged first", () => {
    const csv = "Sample,Group,Ir,MgO\nB,CK,600,39\nB,CK,700,40\n";
    const page = halves({ b: csv });
    page.source("b", csv, { columns: [sample, group, { ...wtpct("Ir"), unit: "ng/g" }, wtpct("MgO")], setAside: [{ row: 1, reason: "x" }] });
    expect(valuesOf(page.add(join), "MgO_b")).toEqual([null, 40]);
    const merged = halves({ b: csv }).add({ ...join, replicates: "mean" });
    expect(valuesOf(merged, "MgO_b")[1]).toBeCloseTo(39.5, 12);
    expect(tableOf(merged).origins[1]).toHaveLength(3);
  });

  it("sets aside what is set aside in its table, and the sample where it is so in all", () => {
    const page = halves();
    page.source("a", "Sample,Group,MgO\nA,CV,37\nB,CV,38\n", {
      columns: [sample, group, wtpct("MgO")],
      setAside: [
        { row: 1, reason: "x" },
        { row: 2, reason: "x" },
      ],
    });
    const result = page.add(join);
    expect([...tableOf(result).setAside]).toEqual([1, 0, 0]);
    expect(statesOf(result, "MgO")).toEqual(["present", "set aside", "missing"]);
    expect(result.valuesSetAside).toBe(1);
  });
});

describe("replicates", () => {
  const csv = "Sample,Lab,MgO,s MgO,Ir\nA,Bern,40,0.3,<5\nA,Bonn,41,0.4,7\nA,Lyon,43,,9\nB,Bern,38,0.5,<3\nB,Bonn,38,0.5,<2\nC,Bern,1,0.1,1\n";
  const columns: DataBlock["columns"] = [sample, { header: "Lab", role: "text" }, wtpct("MgO"), sigma("MgO"), { ...wtpct("Ir"), unit: "ng/g" }];
  const merge = (replicates: DataBlock["replicates"], more: Partial<DataBlock> = {}) =>
    new DataPage().source("ch", csv, { columns, ...(replicates === undefined ? {} : { replicates }), ...more });

  it("weighted agree with the mean reckoned by hand", () => {
    const result = merge("weighted");
    // Weights 1/0.09 and 1/0.16: (40/0.09 + 41/0.16) / (1/0.09 + 1/0.16) = 40.36, σ = 1/√(1/0.09 + 1/0.16) = 0.24. Lyon has no σ.
    expect(valuesOf(result, "MgO")[0]).toBeCloseTo(40.36, 10);
    expect(sigmasOf(result, "MgO")[0]).toBeCloseTo(0.24, 10);
    expect(valuesOf(result, "MgO")[1]).toBeCloseTo(38, 12);
    expect(sigmasOf(result, "MgO")[1]).toBeCloseTo(0.5 / Math.SQRT2, 12);
    expect(problemOf(result, "replicates-no-weight").text).toContain("1 value without a σ");
    expect(problemOf(result, "replicates").text).toContain("σ = 1/√Σ(1/σ²)");
  });

  it("leave one row a sample, with all origins and texts", () => {
    const table = tableOf(merge("weighted"));
    expect(table.samples).toEqual(["A", "B", "C"]);
    expect(table.rowIds).toEqual([1, 4, 6]);
    expect(table.origins.map((origins) => origins.map((origin) => origin.row))).toEqual([[1, 2, 3], [4, 5], [6]]);
    expect(quantity(merge("weighted"), "MgO").raw[0]).toBe("40; 41");
    expect(words(merge("mean"), "Lab")).toEqual(["Bern; Bonn; Lyon", "Bern; Bonn", "Bern"]);
  });

  it("averaged have the σ of their spread, and their own where they have none", () => {
    const result = merge("mean");
    expect(valuesOf(result, "MgO")[0]).toBeCloseTo(124 / 3, 10);
    // s of 40, 41, 43 is √(7/3); over √3.
    expect(sigmasOf(result, "MgO")[0]).toBeCloseTo(Math.sqrt(7) / 3, 10);
    expect(sigmasOf(result, "MgO")[1]).toBeCloseTo(Math.sqrt(0.5) / 2, 12);
    expect(valuesOf(result, "MgO")[2]).toBeCloseTo(1, 12);
    expect(sigmasOf(result, "MgO")[2]).toBeCloseTo(0.1, 12);
  });

  it("an unknown σ taken as 0: equal analyses without a σ leave it unknown", () => {
    const result = new DataPage().source("ch", "Sample,MgO\nA,40\nA,40\n", { columns: [sample, wtpct("MgO")], replicates: "mean" });
    expect(valuesOf(result, "MgO")).toEqual([40]);
    expect(sigmasOf(result, "MgO")).toEqual([null]);
  });

  it("'<' turned into 0: below detection does not enter a mean, and the lowest limit stays", () => {
    const result = merge("mean");
    expect(valuesOf(result, "Ir")[0]).toBeCloseTo(8, 12);
    expect(statesOf(result, "Ir")).toEqual(["present", "below detection", "present"]);
    expect(quantity(result, "Ir").limit[1]).toBeCloseTo(2e-9, 20);
    expect(problemOf(result, "replicates-below").severity).toBe("warning");
  });

  it("without any σ are averaged plainly, and said", () => {
    const result = merge("weighted");
    expect(problemOf(result, "replicates-unweighted").severity).toBe("warning");
    expect(sigmasOf(result, "Ir")[0]).toBeCloseTo(1, 12);
  });

  it("that scatter beyond their σ are said", () => {
    const result = new DataPage().source("ch", "Sample,MgO,s MgO\nA,40,0.1\nA,42,0.1\n", {
      columns: [sample, wtpct("MgO"), sigma("MgO")],
      replicates: "weighted",
    });
    expect(problemOf(result, "replicates-scatter").text).toContain("A in MgO");
  });

  it("set aside stay rows of their own and do not count", () => {
    const result = merge("weighted", { setAside: [{ row: 1, sample: "A", reason: "x" }] });
    expect(tableOf(result).rowIds).toEqual([1, 2, 4, 6]);
    expect([...tableOf(result).setAside]).toEqual([1, 0, 0, 0]);
    expect(valuesOf(result, "MgO")[1]).toBeCloseTo(41, 12);
    expect(result).toMatchObject({ samples: 3, setAside: 1 });
  });

  it("preferred by laboratory take its value, and the next where it has none", () => {
    const prefer = (...list: string[]) => merge({ prefer: list }, { setAside: [{ row: 3, column: "MgO", reason: "x" }] });
    expect(valuesOf(prefer("Bonn"), "MgO")).toEqual([41, 38, 1]);
    const result = prefer("Lyon", "Bern");
    expect(valuesOf(result, "MgO")).toEqual([40, 38, 1]);
    expect(sigmasOf(result, "MgO")[0]).toBeCloseTo(0.3, 12);
    expect(valuesOf(result, "Ir")[0]).toBeCloseTo(9, 12);
    expect(problemOf(result, "replicates-filled").text).toContain("1 value");
    expect(problemOf(prefer("Bern", "Bonn", "Lyon", "Rome"), "prefer-unknown").text).toContain('"Rome"');
  });

  it("preferred by table, where they are stacked", () => {
    const page = new DataPage();
    page.source("a", "Sample,MgO\nA,40\n", { columns: [sample, wtpct("MgO")] });
    page.source("b", "Sample,MgO\nA,41\n", { columns: [sample, wtpct("MgO")] });
    const result = page.add({ id: "all", kind: "data", stack: ["a", "b"], replicates: { prefer: ["b"] } });
    expect(valuesOf(result, "MgO")).toEqual([41]);
    expect(tableOf(result).origins).toEqual([
      [
        { table: "a", row: 1 },
        { table: "b", row: 1 },
      ],
    ]);
  });

  it("that stand equally high and differ are an error, and no value is chosen", () => {
    const result = merge({ prefer: ["Rome"] });
    const [problem] = problemsOf(result, "replicates-ambiguous");
    expect(problem).toMatchObject({ severity: "error", row: 1, column: "MgO" });
    expect(problem?.text).toContain("A, MgO: rows 1, 2 and 3 stand equally high");
    expect(statesOf(result, "MgO")).toEqual(["out of domain", "present", "present"]);
  });

  it("keep the correlation of their means", () => {
    const own = "Sample,MgO,s MgO,SiO2,s SiO2\nA,40,0.3,44,0.6\nA,41,0.4,45,0.8\n";
    const result = new DataPage().source("ch", own, {
      columns: [sample, wtpct("MgO"), sigma("MgO"), wtpct("SiO2"), sigma("SiO2")],
      correlations: [{ of: ["MgO", "SiO2"], value: 0.5 }],
      replicates: "weighted",
    });
    // All analyses have one correlation and σ in one proportion, so their weighted means have it too.
    expect(tableOf(result).correlations[0]?.value[0]).toBeCloseTo(0.5, 12);
  });

  it("merge to what lies between them, and never to a larger σ than the least", () => {
    const analysis = fc.tuple(fc.double({ min: 1, max: 90, noNaN: true }), fc.double({ min: 0.01, max: 5, noNaN: true }));
    fc.assert(
      fc.property(fc.array(analysis, { minLength: 2, maxLength: 6 }), (analyses) => {
        const texts = analyses.map(([value, s]) => [value.toFixed(4), s.toFixed(4)] as const);
        const result = new DataPage().source("ch", `Sample,MgO,s MgO\n${texts.map(([value, s]) => `A,${value},${s}`).join("\n")}\n`, {
          columns: [sample, wtpct("MgO"), sigma("MgO")],
          replicates: "weighted",
        });
        const [value] = valuesOf(result, "MgO");
        const [s] = sigmasOf(result, "MgO");
        const numbers = texts.map(([text]) => Number(text));
        expect(value).toBeGreaterThanOrEqual(Math.min(...numbers) - 1e-9);
        expect(value).toBeLessThanOrEqual(Math.max(...numbers) + 1e-9);
        expect(s).toBeLessThanOrEqual(Math.min(...texts.map(([, text]) => Number(text))) + 1e-12);
        expect(tableOf(result).origins).toEqual([texts.map((_, i) => ({ table: "ch", row: i + 1 }))]);
      }),
      { seed, numRuns: 60 },
    );
  });
});
