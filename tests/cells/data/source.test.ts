import { describe, expect, it } from "vitest";
import type { DataBlock } from "../../../cells/page/schema";
import { DataPage, errorsOf, problemOf, problemsOf, quantity, read, sample, sigmasOf, statesOf, tableOf, valuesOf, words, wtpct } from "./blocks";

const csv = "Sample,Group,SiO2 (wt%),2s SiO2,MgO\nA,CV,45.0,0.8,37.8\nB,CV,<0.05,,n.d.\nC,CK,44.0,,b.d.l.\n";
const columns: DataBlock["columns"] = [
  sample,
  { header: "Group", role: "class" },
  { header: "SiO2 (wt%)", name: "SiO2", role: "quantity", species: "SiO2", unit: "wt%" },
  { header: "2s SiO2", role: "uncertainty", of: "SiO2", as: "2 sigma" },
  wtpct("MgO"),
];

describe("a source", () => {
  it("is read by the columns the block gives", () => {
    const result = read(csv, { columns });
    const table = tableOf(result);
    expect(result.problems).toEqual([]);
    expect(result.proposed).toBe(false);
    expect(table).toMatchObject({ handle: "ch", rows: 3, rowIds: [1, 2, 3], samples: ["A", "B", "C"], classes: ["CV", "CV", "CK"] });
    expect(table.origins).toEqual([[{ table: "ch", row: 1 }], [{ table: "ch", row: 2 }], [{ table: "ch", row: 3 }]]);
    expect(valuesOf(result, "SiO2")).toEqual([45, null, 44]);
    expect(quantity(result, "SiO2").value[0]).toBe(45 / 100);
    expect(sigmasOf(result, "SiO2")).toEqual([0.4, null, null]);
    expect(statesOf(result, "SiO2")).toEqual(["present", "below detection", "present"]);
    expect(statesOf(result, "MgO")).toEqual(["present", "missing", "below detection"]);
    expect(quantity(result, "SiO2").limit[1]).toBe(0.05 / 100);
    expect(quantity(result, "MgO").limit[2]).toBeNaN();
    expect(quantity(result, "SiO2")).toMatchObject({ header: "SiO2 (wt%)", sigmaHeader: "2s SiO2", raw: ["45.0", "<0.05", "44.0"], rawSigma: ["0.8", "", ""] });
  });

  it("counts what each column holds", () => {
    expect(read(csv, { columns }).columns).toEqual([
      { name: "Sample", role: "sample", unit: "", n: 3, missing: 0, belowDetection: 0, setAside: 0, assumed: 0, withoutSigma: 0 },
      { name: "Group", role: "class", unit: "", n: 3, missing: 0, belowDetection: 0, setAside: 0, assumed: 0, withoutSigma: 0 },
      { name: "SiO2", role: "quantity", unit: "wt%", n: 2, missing: 0, belowDetection: 1, setAside: 0, assumed: 0, withoutSigma: 1 },
      { name: "MgO", role: "quantity", unit: "wt%", n: 1, missing: 1, belowDetection: 1, setAside: 0, assumed: 0, withoutSigma: 1 },
    ]);
  });

  it("is read by the importer's proposal where the block gives no columns, and says so", () => {
    const result = read(csv);
    expect(result.proposed).toBe(true);
    expect(problemOf(result, "columns-proposed")).toMatchObject({ severity: "note", block: "ch" });
    expect(sigmasOf(result, "SiO2")).toEqual([0.4, null, null]);
  });

  it("that is not there is an error that names the file", () => {
    const result = new DataPage().add({ id: "ch", kind: "data", source: { file: "chondrites.csv" }, columns });
    expect(result.table).toBeUndefined();
    expect(result.samples).toBe(0);
    expect(problemOf(result, "source-missing")).toMatchObject({ severity: "error", block: "ch" });
    expect(problemOf(result, "source-missing").text).toContain('"chondrites.csv"');
  });

  it("that is no table says what it is", () => {
    const result = new DataPage().add({ id: "ch", kind: "data", source: { file: "x.pdf" } }, new TextEncoder().encode("%PDF-1.7 and so on"));
    expect(problemOf(result, "source-not-text").text).toContain("a PDF");
  });

  it("names what is not read of it", () => {
    expect(problemOf(read(csv, { columns: columns.slice(0, 3) }), "columns-not-read")).toMatchObject({
      severity: "note",
      text: "2 columns of the source are given no role and not read: 2s SiO2 and MgO.",
    });
  });
});

describe("headers", () => {
  it("that the source does not have are an error that lists what it has, and the rest stands", () => {
    const result = read(csv, { columns: [sample, wtpct("SiO2", "SiO2 (wt%)"), wtpct("CaO")] });
    const problem = problemOf(result, "header-not-found");
    expect(problem).toMatchObject({ severity: "error", column: "CaO" });
    expect(problem.text).toContain('no column with the header "CaO"');
    expect(problem.text).toContain("2s SiO2");
    expect(tableOf(result).columns.map((column) => column.name)).toEqual(["Sample", "SiO2"]);
  });

  it("that stand elsewhere than the block says are an error that tells what stands there", () => {
    const result = read(csv, { columns: [sample, { ...wtpct("MgO"), position: 3 }] });
    expect(problemOf(result, "header-position").text).toBe(
      'Column 3 of the source is "SiO2 (wt%)", not "MgO", which stands in column 5. Correct the header or the place.',
    );
  });

  it("beyond the last column are an error", () => {
    expect(problemOf(read(csv, { columns: [sample, { ...wtpct("MgO"), position: 9 }] }), "header-position").text).toContain("the source has 5 columns");
  });

  it("that stand twice need a place, and are told apart by it", () => {
    const twice = "Sample,MgO,MgO\nA,1,2\n";
    expect(problemOf(read(twice, { columns: [sample, wtpct("MgO")] }), "header-ambiguous").text).toContain("2 times, in columns 2 and 3");
    const placed = read(twice, { columns: [sample, { ...wtpct("MgO"), position: 3 }] });
    expect(valuesOf(placed, "MgO")).toEqual([2]);
  });

  it("of one name are an error, and the name means none of them", () => {
    const result = read("Sample,MgO,Mg oxide\nA,1,2\n", { columns: [sample, wtpct("MgO"), { ...wtpct("MgO"), header: "Mg oxide" }] });
    expect(problemOf(result, "column-name-twice")).toMatchObject({ severity: "error", column: "MgO" });
    expect(tableOf(result).columns.map((column) => column.name)).toEqual(["Sample"]);
  });

  it("of a species without a unit anywhere are not read by guess", () => {
    const result = read("Sample,MgO\nA,1\n", { columns: [sample, { header: "MgO", role: "quantity", species: "MgO" }] });
    expect(problemOf(result, "unit-missing")).toMatchObject({ severity: "error", column: "MgO" });
    const said = read("Sample,MgO (µg/g)\nA,1\n", { columns: [sample, { header: "MgO (µg/g)", name: "MgO", role: "quantity", species: "MgO" }] });
    expect(quantity(said, "MgO").unit.symbol).toBe("µg/g");
  });

  it("with a unit or a species nobody knows are errors in words", () => {
    expect(problemOf(read(csv, { columns: [{ ...wtpct("MgO"), unit: "furlong" }] }), "unit-unknown").text).toContain('"furlong" of the column MgO');
    expect(problemOf(read(csv, { columns: [{ ...wtpct("MgO"), species: "olivine" }] }), "species-unknown").text).toContain('"olivine"');
  });

  it("of two columns of sample names are an error", () => {
    const result = read("Sample,Name\nA,B\n", { columns: [sample, { header: "Name", role: "sample" }] });
    expect(problemOf(result, "role-twice").text).toContain("Sample is used");
  });
});

describe("uncertainties", () => {
  const one = (as: NonNullable<DataBlock["columns"]>[number]["as"], text: string, more: object = {}) =>
    read(`Sample,MgO,u\nA,40,${text}\n`, {
      columns: [sample, wtpct("MgO"), { header: "u", role: "uncertainty", of: "MgO", ...(as === undefined ? {} : { as }), ...more }],
    });

  it.each([
    ["1 sigma", "0.4", 0.4],
    ["2 sigma", "0.4", 0.2],
    ["1 sigma relative %", "1", 0.4],
    ["2 sigma relative %", "1", 0.2],
    ["95 % interval", "1.959964", 1],
  ] as const)("of the kind %s become 1σ", (as, text, sigma) => {
    expect(sigmasOf(one(as, text), "MgO")[0]).toBeCloseTo(sigma, 6);
  });

  it("1σ mixed with 2σ: a column that does not say which it is is not used, and its σ are unknown", () => {
    const result = one(undefined, "0.4");
    expect(problemOf(result, "sigma-kind-missing").severity).toBe("error");
    expect(sigmasOf(result, "MgO")).toEqual([null]);
  });

  it("1σ mixed with 2σ: two tables of different kinds agree once stacked", () => {
    const page = new DataPage();
    for (const [id, as, text] of [
      ["a", "1 sigma", "0.4"],
      ["b", "2 sigma", "0.8"],
    ] as const)
      page.source(id, `Sample,MgO,u\n${id},40,${text}\n`, { columns: [sample, wtpct("MgO"), { header: "u", role: "uncertainty", of: "MgO", as }] });
    expect(sigmasOf(page.add({ id: "all", kind: "data", stack: ["a", "b"] }), "MgO")).toEqual([0.4, 0.4]);
  });

  it("an unknown σ taken as 0: a blank, a dash, a relative σ of 0 and one that cannot be read stay unknown", () => {
    const result = read("Sample,MgO,u\nA,40,\nB,40,-\nC,0,5\nD,40,abc\nE,40,-1\nF,40,<2\n", {
      columns: [sample, wtpct("MgO"), { header: "u", role: "uncertainty", of: "MgO", as: "1 sigma relative %" }],
    });
    expect(sigmasOf(result, "MgO")).toEqual([null, null, null, null, null, null]);
    expect(problemsOf(result, "sigma-unreadable").map((problem) => problem.row)).toEqual([4, 5, 6]);
    expect(problemOf(result, "sigma-of-zero").severity).toBe("warning");
    expect(result.columns[1]).toMatchObject({ n: 6, withoutSigma: 6 });
  });

  it("of exactly 0 are kept and said", () => {
    const result = one("1 sigma", "0");
    expect(sigmasOf(result, "MgO")).toEqual([0]);
    expect(problemOf(result, "sigma-zero").text).toContain("1 uncertainty of MgO is 0");
  });

  it("in another unit than the value are converted, or refused", () => {
    expect(sigmasOf(one("1 sigma", "4000", { unit: "µg/g" }), "MgO")[0]).toBeCloseTo(0.4, 12);
    expect(problemOf(one("1 sigma", "4", { unit: "K" }), "sigma-unit").text).toContain("cannot belong together");
  });

  it("inside cells are read, and of a kind that nobody said are 1σ with a warning", () => {
    const cells = "Sample,MgO\nA,45.0 ± 0.4\nB,45.0(4)\n";
    const untold = read(cells, { columns: [sample, wtpct("MgO")] });
    expect(sigmasOf(untold, "MgO").map((sigma) => sigma?.toFixed(6))).toEqual(["0.400000", "0.400000"]);
    expect(problemOf(untold, "sigma-kind-assumed").severity).toBe("warning");
    const told = read(cells, { columns: [sample, { ...wtpct("MgO"), as: "2 sigma" }] });
    expect(sigmasOf(told, "MgO").map((sigma) => sigma?.toFixed(6))).toEqual(["0.200000", "0.200000"]);
    expect(problemsOf(told, "sigma-kind-assumed")).toEqual([]);
  });

  it("in % inside a column of wt% mean two things and are not guessed", () => {
    const result = read("Sample,MgO\nA,45.0 ± 1%\n", { columns: [sample, wtpct("MgO")] });
    expect(valuesOf(result, "MgO")).toEqual([45]);
    expect(sigmasOf(result, "MgO")).toEqual([null]);
    expect(problemOf(result, "sigma-percent").severity).toBe("error");
  });

  it("of no quantity, of a strange one, and two of one are errors", () => {
    const csv = "Sample,MgO,u,v\nA,40,1,2\n";
    const u = { header: "u", role: "uncertainty", as: "1 sigma" } as const;
    expect(problemOf(read(csv, { columns: [wtpct("MgO"), u] }), "sigma-of-nothing").text).toContain("does not say of which");
    expect(problemOf(read(csv, { columns: [wtpct("MgO"), { ...u, of: "CaO" }] }), "sigma-of-nothing").text).toContain('"CaO"');
    const twice = read(csv, { columns: [wtpct("MgO"), { ...u, of: "MgO" }, { ...u, header: "v", of: "MgO" }] });
    expect(problemOf(twice, "sigma-twice").severity).toBe("error");
    expect(sigmasOf(twice, "MgO")).toEqual([null]);
  });
});

describe("cells", () => {
  it("'<' turned into 0: below detection has no value, keeps its limit, and is counted", () => {
    const result = read("Sample,MgO\nA,<0.05\nB,b.d.l.\n", { columns: [sample, wtpct("MgO")] });
    expect(valuesOf(result, "MgO")).toEqual([null, null]);
    expect(Array.from(quantity(result, "MgO").limit)).toEqual([0.05 / 100, Number.NaN]);
    expect(result.columns[1]).toMatchObject({ n: 0, belowDetection: 2 });
  });

  it("that cannot be read are errors with row and column, and have no value", () => {
    const result = read("Sample,MgO\nA,abc\nB,40.1\nC,#REF!\n", { columns: [sample, wtpct("MgO")] });
    expect(statesOf(result, "MgO")).toEqual(["missing", "present", "missing"]);
    expect(problemOf(result, "cell-not-a-number")).toMatchObject({ severity: "error", row: 1, column: "MgO", block: "ch" });
    expect(problemOf(result, "cell-spreadsheet-error").row).toBe(3);
  });

  it("that cannot be read by the thousand are said twenty times and counted", () => {
    const rows = Array.from({ length: 1000 }, (_, i) => `S${i},abc`).join("\n");
    const said = problemsOf(read(`Sample,MgO\n${rows}\n`, { columns: [sample, wtpct("MgO")] }), "cell-not-a-number");
    expect(said).toHaveLength(21);
    expect(said[20]?.text).toBe("980 more cells of MgO have the same fault.");
    expect(said[20]?.row).toBeUndefined();
  });

  it("in another unit than their column are converted, or refused", () => {
    const result = read("Sample,MgO\nA,4000 µg/g\nB,300 K\n", { columns: [sample, wtpct("MgO")] });
    expect(valuesOf(result, "MgO")[0]).toBeCloseTo(0.4, 12);
    expect(problemOf(result, "cell-unit").row).toBe(2);
  });

  it("with a power of ten are read, however it is written, and a limit of 0 is none", () => {
    const result = read("Sample,MgO\nA,1.5×10³\nB,1.5 x 10^3\nC,1.5·10⁻³\nD,45.0²\nE,<0\n", { columns: [sample, { ...wtpct("MgO"), unit: "µg/g" }] });
    expect(valuesOf(result, "MgO").map((value) => value?.toPrecision(6))).toEqual(["1500.00", "1500.00", "0.00150000", "45.0000", undefined]);
    expect(problemOf(result, "cell-limit").row).toBe(5);
  });

  it("below absolute zero are out of domain", () => {
    const result = read("Sample,T\nA,-300\nB,20\n", { columns: [sample, { header: "T", role: "quantity", unit: "°C" }] });
    expect(statesOf(result, "T")).toEqual(["out of domain", "present"]);
    expect(quantity(result, "T").value[1]).toBeCloseTo(293.15, 12);
  });

  it("use the file's decimal comma", () => {
    const result = read("Sample;MgO;u\nA;40,5;0,8\n", { columns: [sample, wtpct("MgO"), { header: "u", role: "uncertainty", of: "MgO", as: "2 sigma" }] });
    expect(valuesOf(result, "MgO")).toEqual([40.5]);
    expect(sigmasOf(result, "MgO")).toEqual([0.4]);
  });
});

describe("ratios", () => {
  it("keep the basis they state and have none otherwise", () => {
    const ratio = { header: "Mg/Si", name: "mg_si", role: "quantity", unit: "1" } as const;
    expect(quantity(read("Sample,Mg/Si\nA,1.07\n", { columns: [sample, { ...ratio, basis: "atoms" }] }), "mg_si").basis).toBe("atoms");
    expect(quantity(read("Sample,Mg/Si\nA,1.07\n", { columns: [sample, ratio] }), "mg_si").basis).toBeUndefined();
    const odd = read("Sample,MgO\nA,1.07\n", { columns: [sample, { ...wtpct("MgO"), basis: "atoms" }] });
    expect(problemOf(odd, "basis-without-ratio").severity).toBe("warning");
  });
});

describe("typed rows", () => {
  const typed: Partial<DataBlock> = {
    columns: [
      { name: "Sample", role: "sample" },
      { name: "MgO", role: "quantity", species: "MgO", unit: "wt%" },
      { name: "u", role: "uncertainty", of: "MgO", as: "2 sigma" },
    ],
    typed: [
      { id: "k3", cells: { Sample: "A", MgO: "40.1", u: "0.8" } },
      { id: "k1", cells: { Sample: "B", MgO: "<0.1" } },
    ],
  };

  it("keep their ids, and read as sources do", () => {
    const result = new DataPage().add({ id: "ty", kind: "data", ...typed });
    expect(result.problems).toEqual([]);
    expect(tableOf(result)).toMatchObject({ rowIds: ["k3", "k1"], samples: ["A", "B"], origins: [[{ table: "ty", row: "k3" }], [{ table: "ty", row: "k1" }]] });
    expect(sigmasOf(result, "MgO")).toEqual([0.4, null]);
    expect(statesOf(result, "MgO")).toEqual(["present", "below detection"]);
  });

  it("are an empty table where there are none", () => {
    const result = new DataPage().add({ id: "ty", kind: "data", typed: [] });
    expect(errorsOf(result)).toEqual([]);
    expect(tableOf(result)).toMatchObject({ rows: 0, columns: [] });
  });

  it("of one id, and cells without a column, are said", () => {
    const row = { id: "k", cells: { Sample: "A", CaO: "1" } };
    expect(problemOf(new DataPage().add({ id: "ty", kind: "data", ...typed, typed: [row, row] }), "row-twice").text).toContain('"k"');
    expect(problemOf(new DataPage().add({ id: "ty", kind: "data", ...typed, typed: [row] }), "cells-without-column").text).toContain("CaO");
  });

  it("do not take inherited properties for cells", () => {
    const result = new DataPage().add({ id: "ty", kind: "data", columns: [{ name: "constructor", role: "text" }], typed: [{ id: "k", cells: {} }] });
    expect(words(result, "constructor")).toEqual([""]);
  });
});

describe("a large source", () => {
  it("of 20,000 rows and 20 columns is read well within a second", () => {
    const species = ["SiO2", "TiO2", "Al2O3", "Cr2O3", "FeOt", "MnO", "MgO", "CaO", "Na2O", "K2O"];
    const head = ["Sample", "Group", ...species.flatMap((name) => [name, `2s ${name}`])];
    const lines = Array.from({ length: 20_000 }, (_, i) =>
      [
        `S${i}`,
        `G${i % 7}`,
        ...species.flatMap((_, j) => [((i * 7 + j * 13) % 997) / 20 + 0.1, ((i + j) % 9) / 10 + 0.1].map((value) => value.toFixed(3))),
      ].join(","),
    );
    const bytes = new TextEncoder().encode([head.join(","), ...lines].join("\n"));
    const columns = [
      sample,
      { header: "Group", role: "class" } as const,
      ...species.flatMap((name) => [wtpct(name), { header: `2s ${name}`, role: "uncertainty", of: name, as: "2 sigma" } as const]),
    ];
    const before = process.cpuUsage();
    const result = new DataPage().add({ id: "big", kind: "data", source: { file: "big.csv" }, columns }, bytes);
    const spent = process.cpuUsage(before);
    const took = (spent.user + spent.system) / 1000;
    expect(tableOf(result).rows).toBe(20_000);
    expect(errorsOf(result)).toEqual([]);
    // Processor time, since the machine may be busy; generous by a factor of three.
    expect(took).toBeLessThan(1800);
    console.log(`20,000 × 22 cells in ${took.toFixed(0)} ms`);
  });
});
