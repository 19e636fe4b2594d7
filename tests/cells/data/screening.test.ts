import { describe, expect, it } from "vitest";
import type { ScreeningFlag } from "../../../cells/page/results";
import type { DataBlock } from "../../../cells/page/schema";
import { DataPage, errorsOf, problemOf, problemsOf, read, sample, tableOf, valuesOf, wtpct } from "./blocks";

type Columns = NonNullable<DataBlock["columns"]>;

/** Texts of the flags of one kind. */
function flags(screening: readonly ScreeningFlag[], code: ScreeningFlag["code"]): readonly ScreeningFlag[] {
  return screening.filter((flag) => flag.code === code);
}

describe("totals", () => {
  const major = ["SiO2", "Al2O3", "MgO", "CaO"];
  /** Majors that sum to 90 wt%, and what else is given. */
  const rock = (more: Readonly<Record<string, string>>, rest: Partial<DataBlock> = {}, columns: Columns = Object.keys(more).map((name) => wtpct(name))) => {
    const head = ["Sample", ...major, ...Object.keys(more)].join(",");
    return read(`${head}\nA,45,4,38,3,${Object.values(more).join(",")}\n`, { columns: [sample, ...major.map((name) => wtpct(name)), ...columns], ...rest });
  };
  const totals = (...given: Parameters<typeof rock>): readonly string[] => flags(rock(...given).screening, "total").map((flag) => flag.text);

  it("are checked where the major oxides and all the iron are there", () => {
    expect(totals({ FeOt: "9" })).toEqual([]);
    expect(totals({ FeOt: "5.8" })).toEqual(["total 95.8 wt%, below 98.5"]);
    expect(totals({ FeOt: "12" })).toEqual(["total 102.0 wt%, above 101.5"]);
  });

  it("of a stack are held against the ranges of the tables its rows were read in, unless it sets its own", () => {
    const page = new DataPage();
    const columns = [sample, ...[...major, "FeOt"].map((name) => wtpct(name))];
    const head = ["Sample", ...major, "FeOt"].join(",");
    page.source("fresh", `${head}\nA,45,4,38,3,5.8\n`, { columns });
    page.source("wet", `${head}\nB,45,4,38,3,5.8\n`, { columns, totals: { from: 94, to: 101 } });
    const noticed = (rest: Partial<DataBlock>): readonly string[] =>
      flags(page.add({ id: "all", kind: "data", stack: ["fresh", "wet"], ...rest }).screening, "total").map((flag) => `${flag.sample}: ${flag.text}`);
    expect(noticed({})).toEqual(["A: total 95.8 wt%, below 98.5"]);
    expect(noticed({ totals: { from: 90, to: 101 } })).toEqual([]);
    page.add({ id: "inner", kind: "data", stack: ["fresh", "wet"] });
    expect(noticed({ stack: ["inner"] })).toEqual(["A: total 95.8 wt%, below 98.5"]);
  });

  it("are held against the range set for the table", () => {
    expect(totals({ FeOt: "5.8" }, { totals: { from: 95, to: 102 } })).toEqual([]);
    expect(totals({ FeOt: "9" }, { totals: { from: 99.5, to: 100.5 } })).toEqual(["total 99.0 wt%, below 99.5"]);
  });

  it("iron counted twice or by half: a total beside its parts counts once, parts are added, metal by its own mass", () => {
    expect(totals({ FeOt: "10", FeO: "8", Fe2O3: "2.2" })).toEqual([]);
    expect(totals({ FeOt: "10", Fe2O3t: "11.1" })).toEqual([]);
    expect(totals({ Fe2O3t: "10" })).toEqual([]);
    expect(totals({ FeO: "8", Fe2O3: "2" })).toEqual([]);
    expect(totals({ FeO: "2", Fe_metal: "5", FeS: "3" })).toEqual([]);
  });

  it("iron counted twice or by half: a bare column that does not say what it is gives no total", () => {
    const result = rock({ FeO: "5" });
    expect(flags(result.screening, "total")).toEqual([]);
    expect(problemOf(result, "totals-iron").severity).toBe("note");
  });

  it("are not checked in rows without a major oxide or the iron, and say what is missing else", () => {
    expect(totals({ FeOt: "n.d." })).toEqual([]);
    expect(totals({ FeOt: "6", Na2O: "<0.1" })).toEqual(["total 96.0 wt%, below 98.5, without Na2O"]);
    expect(flags(read("Sample,SiO2,MgO\nA,45,38\n", { columns: [sample, wtpct("SiO2"), wtpct("MgO")] }).screening, "total")).toEqual([]);
  });

  it("count loss on ignition for the volatiles, and an element only where its oxide is not there", () => {
    const loi: Columns = [wtpct("FeOt"), { header: "LOI", role: "quantity", unit: "wt%" }, wtpct("H2O"), wtpct("Mg")];
    expect(totals({ FeOt: "7", LOI: "3", H2O: "3", Mg: "23" }, {}, loi)).toEqual([]);
    const nickel: Columns = [wtpct("FeOt"), { ...wtpct("Ni"), unit: "µg/g" }];
    expect(totals({ FeOt: "8", Ni: "10000" }, {}, nickel)).toEqual([]);
    expect(totals({ FeOt: "8", Ni: "2000" }, {}, nickel)).toEqual(["total 98.2 wt%, below 98.5"]);
  });

  it("take each row's own iron, where tables that give it differently are stacked", () => {
    const page = new DataPage();
    for (const [id, iron] of [
      ["a", "FeOt"],
      ["b", "Fe2O3t"],
    ] as const)
      page.source(id, `Sample,SiO2,Al2O3,MgO,CaO,${iron}\n${id}1,45,4,38,3,9\n${id}2,45,4,38,3,5.8\n`, {
        columns: [sample, ...major, iron].map((name) => (typeof name === "string" ? wtpct(name) : name)),
      });
    expect(flags(page.add({ id: "all", kind: "data", stack: ["a", "b"] }).screening, "total").map((flag) => flag.row)).toEqual(["a.2", "b.2"]);
  });

  it("never change a value", () => {
    expect(valuesOf(rock({ FeOt: "5.8" }), "SiO2")).toEqual([45]);
  });
});

describe("duplicates", () => {
  it("are samples of one name in use, cases and blanks alike", () => {
    const csv = "Sample,MgO\nTH-1,1\nth-1,2\nTH-2,3\nTH-1,4\n,5\n,6\n";
    const found = flags(read(csv, { columns: [sample, wtpct("MgO")] }).screening, "duplicate");
    expect(found.map((flag) => [flag.row, flag.text])).toEqual([
      [2, "also in rows 1 and 4"],
      [4, "also in rows 1 and 2"],
    ]);
    const aside = read(csv, { columns: [sample, wtpct("MgO")], setAside: [1, 4].map((row) => ({ row, reason: "x" })) });
    expect(flags(aside.screening, "duplicate")).toEqual([]);
  });
});

describe("values far from their class", () => {
  const classes = (values: readonly string[], name = "CV") =>
    flags(
      read(`Sample,Group,MgO\n${values.map((value, i) => `S${i},${name},${value}`).join("\n")}\n`, {
        columns: [sample, { header: "Group", role: "class" }, wtpct("MgO")],
      }).screening,
      "far from class",
    );

  it("have a modified z beyond 3.5 (Iglewicz & Hoaglin 1993)", () => {
    // Median 24.25; |x − median| sorted 0.05 0.05 0.15 0.25 0.25 5.75, so MAD = 0.2 and z = 0.6745 · 5.75 / 0.2 = 19.4.
    const found = classes(["24.0", "24.1", "24.2", "24.3", "24.5", "30.0"]);
    expect(found.map((flag) => flag.row)).toEqual([6]);
    expect(found[0]?.text).toContain("modified z 19.4");
    expect(classes(["24.0", "24.1", "24.2", "24.3", "24.5", "24.6"])).toEqual([]);
  });

  it("are found where more than half are equal and MAD is 0", () => {
    // Median 1, mean |x − median| 9/6 = 1.5: z = 9 / (1.253314 · 1.5) = 4.8.
    const found = classes(["1", "1", "1", "1", "1", "10"]);
    expect(found.map((flag) => [flag.row, flag.column])).toEqual([[6, "MgO"]]);
    expect(found[0]?.text).toContain("modified z 4.8");
    expect(classes(["1", "1", "1", "1", "1", "1"])).toEqual([]);
  });

  it("are not looked for among four, or among samples without a class", () => {
    expect(classes(["1", "1.1", "0.9", "50"])).toEqual([]);
    expect(classes(["1", "1", "1", "1", "1", "50"], "")).toEqual([]);
  });
});

describe("magnitudes", () => {
  it("below zero and above the whole are flagged", () => {
    const result = read("Sample,MgO\nA,-1\nB,250\nC,40\n", { columns: [sample, wtpct("MgO")] });
    expect(flags(result.screening, "negative").map((flag) => [flag.row, flag.text])).toEqual([[1, "MgO −1 wt% is below zero"]]);
    expect(flags(result.screening, "unit magnitude").map((flag) => [flag.row, flag.text])).toEqual([[2, "MgO 250 wt% is more than the whole sample"]]);
    expect(errorsOf(result)).toEqual([]);
  });

  it("of a whole column that do not fit its unit are flagged once", () => {
    const result = read("Sample,SiO2,Ir\nA,0.45,0.6\nB,0.44,3\nC,0.46,2\n", { columns: [sample, wtpct("SiO2"), wtpct("Ir")] });
    expect(flags(result.screening, "unit magnitude").map((flag) => [flag.row, flag.column])).toEqual([
      [1, "SiO2"],
      [1, "Ir"],
    ]);
    expect(flags(result.screening, "unit magnitude")[0]?.text).toContain("unusually little for SiO2");
  });
});

describe("species given twice", () => {
  const columns: Columns = [
    sample,
    wtpct("MgO"),
    { header: "s", role: "uncertainty", of: "MgO", as: "1 sigma" },
    wtpct("Mg"),
    { header: "t", role: "uncertainty", of: "Mg", as: "1 sigma" },
  ];

  it("that differ beyond two joint σ are flagged", () => {
    // MgO 40 is Mg 24.12; 0.06 of σ on MgO are 0.036 on Mg.
    const found = flags(read("Sample,MgO,s,Mg,t\nA,40,0.1,24.2,0.1\nB,40,0.1,25.0,0.1\nC,40,0.1,,\n", { columns }).screening, "species disagree");
    expect(found.map((flag) => flag.row)).toEqual([2]);
    expect(found[0]?.text).toMatch(/^Mg is 25 wt% by Mg and 24\.1 wt% by MgO, 7\.5σ apart$/);
  });

  it("iron counted twice or by half: a total that is not the sum of its parts is flagged", () => {
    const iron = ["FeOt", "FeO", "Fe2O3"].map((name) => wtpct(name));
    const found = flags(read("Sample,FeOt,FeO,Fe2O3\nA,10.19,8.34,2.06\nB,10.19,8.34,8.0\n", { columns: [sample, ...iron] }).screening, "species disagree");
    expect(found.map((flag) => flag.row)).toEqual([2]);
    expect(found[0]?.text).toContain("by FeOt and");
  });
});

describe("reference materials", () => {
  it("that are off their recommended values are flagged with the source", () => {
    // BHVO-2: SiO2 49.9 ± 0.6, MgO 7.23 ± 0.12 (USGS).
    const columns = [sample, wtpct("SiO2"), wtpct("MgO")];
    const found = flags(read("Sample,SiO2,MgO\nBHVO-2,49.5,7.6\nTH-1,40,38\n", { columns }).screening, "reference material");
    expect(found.map((flag) => [flag.row, flag.column])).toEqual([[1, "MgO"]]);
    expect(found[0]?.text).toContain("MgO 7.6 wt% against the recommended 7.23 wt% of BHVO-2 (+5.1 %; USGS");
  });
});

describe("screening", () => {
  it("flags without setting anything aside, and only what is in use", () => {
    const result = read("Sample,MgO\nA,-1\nB,-2\n", { columns: [sample, wtpct("MgO")], setAside: [{ row: 2, reason: "x" }] });
    expect(flags(result.screening, "negative")).toHaveLength(1);
    expect([...tableOf(result).setAside]).toEqual([0, 1]);
    expect(valuesOf(result, "MgO")[0]).toBeCloseTo(-1, 12);
  });

  it("keeps 500 flags of a kind and says how many there are", () => {
    const rows = Array.from({ length: 700 }, (_, i) => `S${i},-1`).join("\n");
    const result = read(`Sample,MgO\n${rows}\n`, { columns: [sample, wtpct("MgO")] });
    expect(flags(result.screening, "negative")).toHaveLength(500);
    expect(problemsOf(result, "screening-many").map((problem) => problem.text)).toEqual([
      "Screening noticed negative values 700 times; the first 500 are shown (200 more).",
    ]);
  });

  it("looks at a stack as at any table", () => {
    const page = new DataPage();
    for (const id of ["a", "b"]) page.source(id, "Sample,MgO\nTH-1,40\n", { columns: [sample, wtpct("MgO")] });
    expect(page.add({ id: "all", kind: "data", stack: ["a", "b"] }).screening).toMatchObject([{ code: "duplicate", row: "b.1", text: "also in row a.1" }]);
  });
});
