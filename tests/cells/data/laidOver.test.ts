import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { DataBlock } from "../../../cells/page/schema";
import { seed } from "../../support/seed";
import { DataPage, errorsOf, problemOf, problemsOf, quantity, read, sample, sigmasOf, statesOf, tableOf, valuesOf, words, wtpct } from "./blocks";

const csv = "Sample,Group,MgO,u,SiO2,rho\nTH-05,CV,37.1,0.8,45.2,0.3\nTH-06,CV,42.1,0.8,44.9,\nTH-06,CV,38.0,,<0.2,0.5\n";
const columns: DataBlock["columns"] = [
  sample,
  { header: "Group", role: "class" },
  wtpct("MgO"),
  { header: "u", role: "uncertainty", of: "MgO", as: "2 sigma" },
  wtpct("SiO2"),
  { header: "rho", role: "quantity", unit: "1" },
];
const amendment = { row: 2, sample: "TH-06", column: "MgO", was: "42.1", value: "24.1", reason: "digits swapped" };

describe("amendments", () => {
  it("replace the source's value, which stays visible", () => {
    const result = read(csv, { columns, amendments: [amendment] });
    expect(errorsOf(result)).toEqual([]);
    expect(result.amended).toBe(1);
    expect(valuesOf(result, "MgO")).toEqual([37.1, 24.1, 38]);
    expect(quantity(result, "MgO").raw[1]).toBe("42.1");
    expect([...quantity(result, "MgO").amended]).toEqual([0, 1, 0]);
    expect(sigmasOf(result, "MgO")).toEqual([0.4, 0.4, null]);
  });

  it.each([
    ["no-such-row", { row: 9 }, "Row 9 (TH-06), column MgO: there is no row 9; the table has 3."],
    ["no-such-row", { row: "2" }, "there is no row 2"],
    ["sample-mismatch", { sample: "TH-05" }, 'Row 2 (TH-05), column MgO: this row is "TH-06" in the source, not "TH-05".'],
    ["was-mismatch", { was: "42.0" }, 'Row 2 (TH-06), column MgO: the source has "42.1" here, and the amendment was made over "42.0".'],
    ["was-mismatch", { was: "" }, "the amendment was made over nothing"],
    ["no-such-column", { column: "CaO" }, "Row 2 (TH-06), column CaO: no column has that name or header."],
  ])("that do not fit the source are an error and are not applied: %s", (code, change, text) => {
    const result = read(csv, { columns, amendments: [{ ...amendment, ...change }] });
    expect(problemOf(result, code)).toMatchObject({ severity: "error", block: "ch", field: "amendments[0]" });
    expect(problemOf(result, code).text).toContain(text);
    expect(problemOf(result, code).text).toContain("The amendment is not applied.");
    expect(result.amended).toBe(0);
    expect(valuesOf(result, "MgO")).toEqual([37.1, 42.1, 38]);
  });

  it("that stand for one value twice are both refused", () => {
    const result = read(csv, { columns, amendments: [amendment, { ...amendment, value: "24.2" }] });
    expect(problemOf(result, "amended-twice").text).toContain("neither is applied");
    expect(valuesOf(result, "MgO")[1]).toBe(42.1);
    expect(result.amended).toBe(0);
  });

  it("may give nothing, a limit, an uncertainty, a word and a sample's name", () => {
    const result = read(csv, {
      columns,
      amendments: [
        { ...amendment, value: "" },
        { ...amendment, row: 1, sample: "TH-05", was: "37.1", value: "37.3 ± 0.1" },
        { ...amendment, row: 3, was: "38.0", value: "<0.5" },
        { ...amendment, row: 3, column: "Group", was: "CV", value: "CK" },
        { ...amendment, row: 3, column: "Sample", was: "TH-06", value: "TH-07" },
      ],
    });
    expect(errorsOf(result)).toEqual([]);
    expect(statesOf(result, "MgO")).toEqual(["present", "missing", "below detection"]);
    expect(sigmasOf(result, "MgO")[0]).toBeCloseTo(0.1, 12);
    expect(words(result, "Group")).toEqual(["CV", "CV", "CK"]);
    expect(tableOf(result).samples).toEqual(["TH-05", "TH-06", "TH-07"]);
    expect(tableOf(result).classes).toEqual(["CV", "CV", "CK"]);
  });

  it("of an uncertainty change the σ alone", () => {
    const result = read(csv, { columns, amendments: [{ ...amendment, column: "u", was: "0.8", value: "1.0" }] });
    expect(sigmasOf(result, "MgO")).toEqual([0.4, 0.5, null]);
    expect([...quantity(result, "MgO").amended]).toEqual([0, 0, 0]);
    expect(quantity(result, "MgO").rawSigma[1]).toBe("0.8");
    expect(result.amended).toBe(1);
  });

  it("of a row without a sample name may call it by its number", () => {
    const result = read("MgO\n1\n2\n", { columns: [wtpct("MgO")], amendments: [{ ...amendment, sample: "row 2", was: "2", value: "3" }] });
    expect(valuesOf(result, "MgO")).toEqual([1, 3]);
  });
});

describe("what is set aside", () => {
  it("is a whole sample by its row, other rows of the name untouched", () => {
    const result = read(csv, { columns, setAside: [{ row: 3, sample: "TH-06", reason: "weathered" }] });
    expect([...tableOf(result).setAside]).toEqual([0, 0, 1]);
    expect(result).toMatchObject({ samples: 2, setAside: 1, valuesSetAside: 0 });
    expect(result.columns[2]).toMatchObject({ name: "MgO", n: 2, setAside: 0 });
  });

  it("is a single value, whose text stays", () => {
    const result = read(csv, { columns, setAside: [{ row: 1, sample: "TH-05", column: "MgO", reason: "carbonate" }] });
    expect(statesOf(result, "MgO")).toEqual(["set aside", "present", "present"]);
    expect(valuesOf(result, "MgO")[0]).toBeNull();
    expect(sigmasOf(result, "MgO")[0]).toBeNull();
    expect(quantity(result, "MgO").raw[0]).toBe("37.1");
    expect(result).toMatchObject({ samples: 3, setAside: 0, valuesSetAside: 1 });
    expect(result.columns[2]).toMatchObject({ n: 2, setAside: 1 });
  });

  it.each([
    ["no-such-row", { row: 9, reason: "x" }],
    ["sample-mismatch", { row: 1, sample: "TH-06", reason: "x" }],
    ["no-such-column", { row: 1, column: "CaO", reason: "x" }],
    ["not-a-quantity", { row: 1, column: "Group", reason: "x" }],
  ])("must be what the entry says: %s", (code, entry) => {
    const result = read(csv, { columns, setAside: [entry] });
    expect(problemOf(result, code)).toMatchObject({ severity: "error", row: entry.row, field: "setAside[0]" });
    expect(problemOf(result, code).text).toContain("Nothing is set aside by this entry.");
    expect(result).toMatchObject({ samples: 3, setAside: 0, valuesSetAside: 0 });
  });

  it("knows a sample by its amended name too", () => {
    const renamed = { ...amendment, column: "Sample", was: "TH-06", value: "TH-66" };
    for (const name of ["TH-06", "TH-66"])
      expect(read(csv, { columns, amendments: [renamed], setAside: [{ row: 2, sample: name, reason: "x" }] }).setAside).toBe(1);
  });
});

describe("assumed σ", () => {
  it("counts only where none is given, is counted and marked", () => {
    const result = read(csv, { columns, assumed: [{ column: "MgO", relative: 0.01, reason: "usual repeatability" }] });
    expect(sigmasOf(result, "MgO").slice(0, 2)).toEqual([0.4, 0.4]);
    expect(sigmasOf(result, "MgO")[2]).toBeCloseTo(0.38, 12);
    expect([...quantity(result, "MgO").assumed]).toEqual([0, 0, 1]);
    expect(result.columns[2]).toMatchObject({ assumed: 1, withoutSigma: 0 });
  });

  it("is absolute in the column's unit", () => {
    const result = read(csv, { columns, assumed: [{ column: "SiO2", absolute: 0.2, reason: "x" }] });
    expect(sigmasOf(result, "SiO2")).toEqual([0.2, 0.2, null]);
    expect(result.columns[3]).toMatchObject({ name: "SiO2", assumed: 2 });
  });

  it("an unknown σ taken as 0: a relative one says nothing of a value of 0", () => {
    const result = read("Sample,MgO\nA,0\n", { columns: [sample, wtpct("MgO")], assumed: [{ column: "MgO", relative: 0.01, reason: "x" }] });
    expect(sigmasOf(result, "MgO")).toEqual([null]);
    expect(problemOf(result, "assumed-of-zero").severity).toBe("warning");
  });

  it("for no column, for words, or twice, is an error and not assumed", () => {
    const assume = (...names: string[]) => read(csv, { columns, assumed: names.map((column) => ({ column, relative: 0.01, reason: "x" })) });
    expect(problemOf(assume("CaO"), "assumed-column").text).toContain('"CaO"');
    expect(problemOf(assume("Group"), "assumed-column").text).toContain("it holds words");
    const twice = assume("SiO2", "SiO2");
    expect(problemOf(twice, "assumed-twice").severity).toBe("error");
    expect(sigmasOf(twice, "SiO2")).toEqual([null, null, null]);
  });
});

describe("correlations", () => {
  it("are a number for every row, or a column's", () => {
    const number = tableOf(read(csv, { columns, correlations: [{ of: ["MgO", "SiO2"], value: -0.5 }] }));
    expect(number.correlations.map(({ of, value }) => [of, ...value])).toEqual([[["MgO", "SiO2"], -0.5, -0.5, -0.5]]);
    const result = read(csv, { columns, correlations: [{ of: ["MgO", "SiO2"], value: "rho" }] });
    expect([...(tableOf(result).correlations[0]?.value ?? [])]).toEqual([0.3, 0, 0.5]);
    expect(problemOf(result, "correlation-unknown").text).toContain("1 row");
  });

  it.each([
    [["MgO", "CaO"], 0.5, 'no column has the name "CaO"'],
    [["MgO", "MgO"], 0.5, "one and the same column"],
    [["MgO", "Group"], 0.5, "both must be columns of quantities"],
    [["MgO", "SiO2"], "SiO2", "must be a column of plain numbers"],
    [["MgO", "SiO2"], "gone", 'no column has the name "gone"'],
  ] as const)("that cannot be are refused: %j by %s", (of, value, why) => {
    const result = read(csv, { columns, correlations: [{ of: [...of], value }] });
    expect(problemOf(result, "correlation")).toMatchObject({ severity: "error", field: "correlations[0]" });
    expect(problemOf(result, "correlation").text).toContain(why);
    expect(tableOf(result).correlations).toEqual([]);
  });

  it("beyond 1 are errors of their rows", () => {
    const result = read("Sample,a,b,rho\nA,1,2,1.5\n", {
      columns: [sample, ...["a", "b", "rho"].map((header) => ({ header, role: "quantity" as const, unit: "1" }))],
      correlations: [{ of: ["a", "b"], value: "rho" }],
    });
    expect(problemOf(result, "correlation-range")).toMatchObject({ severity: "error", row: 1, column: "rho" });
    expect([...(tableOf(result).correlations[0]?.value ?? [])]).toEqual([0]);
  });
});

describe("substitution for values below detection", () => {
  const below = "Sample,Ir,u\nA,<0.2,0.1\nB,b.d.l.,\nC,0.4,0.1\n";
  const own: Partial<DataBlock> = { columns: [sample, { ...wtpct("Ir"), unit: "ng/g" }, { header: "u", role: "uncertainty", of: "Ir", as: "1 sigma" }] };

  it("is declared, said and counted; the σ stays unknown, and no limit is invented", () => {
    const result = read(below, { ...own, substitute: { fraction: 0.5, reason: "half the limit" }, assumed: [{ column: "Ir", relative: 0.1, reason: "x" }] });
    expect(valuesOf(result, "Ir")[0]).toBeCloseTo(0.1, 12);
    expect(sigmasOf(result, "Ir")[0]).toBeNull();
    expect(statesOf(result, "Ir")).toEqual(["present", "below detection", "present"]);
    expect(tableOf(result).substitution).toEqual({ fraction: 0.5, reason: "half the limit" });
    expect(problemOf(result, "substitution").text).toBe(
      "1 value below detection counts as 0.5 of the limit, with unknown σ: half the limit. 1 value without a limit stays below detection.",
    );
    expect(result.columns[1]).toMatchObject({ n: 2, belowDetection: 2 });
  });

  it("is not made where nobody declares it", () => {
    const result = read(below, own);
    expect(statesOf(result, "Ir")).toEqual(["below detection", "below detection", "present"]);
    expect(tableOf(result).substitution).toBeUndefined();
  });

  it("'<' turned into 0: a fraction of 0 is refused", () => {
    const result = read(below, { ...own, substitute: { fraction: 0, reason: "zero" } });
    expect(problemOf(result, "substitute-zero").severity).toBe("error");
    expect(statesOf(result, "Ir")[0]).toBe("below detection");
    expect(tableOf(result).substitution).toBeUndefined();
  });
});

describe("whatever is laid over a source", () => {
  it("never moves a row: identities, origins and texts are the source's", () => {
    const row = fc.integer({ min: 1, max: 8 });
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0.01, max: 90, noNaN: true }), { minLength: 5, maxLength: 5 }),
        fc.array(fc.record({ row, column: fc.option(fc.constant("MgO"), { nil: undefined }) }), { maxLength: 5 }),
        fc.uniqueArray(row, { maxLength: 5 }),
        (values, aside, amended) => {
          const texts = values.map((value) => value.toFixed(3));
          const result = read(`Sample,MgO\n${texts.map((text, i) => `S${i + 1},${text}`).join("\n")}\n`, {
            columns: [sample, wtpct("MgO")],
            setAside: aside.map((entry) => ({ row: entry.row, ...(entry.column === undefined ? {} : { column: entry.column }), reason: "x" })),
            amendments: amended.map((at) => ({ row: at, sample: `S${at}`, column: "MgO", was: texts[at - 1] ?? "", value: "50", reason: "x" })),
          });
          const table = tableOf(result);
          expect(table.rowIds).toEqual([1, 2, 3, 4, 5]);
          expect(table.origins).toEqual([1, 2, 3, 4, 5].map((at) => [{ table: "ch", row: at }]));
          const column = quantity(result, "MgO");
          expect(column.raw).toEqual(texts);
          expect(result.amended).toBe(amended.filter((at) => at <= 5).length);
          expect(problemsOf(result, "no-such-row")).toHaveLength(aside.filter((each) => each.row > 5).length + amended.filter((at) => at > 5).length);
          for (let at = 0; at < 5; at++) {
            const valueAside = aside.some((each) => each.row === at + 1 && each.column !== undefined);
            expect(table.setAside[at] === 1).toBe(aside.some((each) => each.row === at + 1 && each.column === undefined));
            expect(Number.isNaN(column.value[at])).toBe(valueAside);
            if (!valueAside) expect(column.value[at]).toBe((amended.includes(at + 1) ? 50 : Number(texts[at])) / 100);
          }
        },
      ),
      { seed, numRuns: 60 },
    );
  });

  it("gives the same table when it is read again", () => {
    const page = new DataPage();
    const bytes = new TextEncoder().encode(csv);
    const block: DataBlock = { id: "ch", kind: "data", source: { file: "ch.csv" }, columns, amendments: [amendment] };
    const first = page.add(block, bytes);
    page.add({ ...block, amendments: [] }, bytes);
    expect(page.add(block, bytes)).toEqual(first);
  });
});

describe("correlations that cannot all hold", () => {
  const csv = "a (wt%),b (wt%),c (wt%),rho\n1,2,3,0.9\n1,2,3,-0.9\n";
  const columns = [wtpct("MgO", "a (wt%)"), wtpct("SiO2", "b (wt%)"), wtpct("CaO", "c (wt%)"), { header: "rho", role: "quantity", unit: "1" }] as const;
  const declare = (...values: (number | string)[]): ReturnType<typeof read> => {
    const of = [
      ["MgO", "SiO2"],
      ["SiO2", "CaO"],
      ["MgO", "CaO"],
    ] as const;
    return read(csv, {
      columns: columns.map((column) => ({ ...column, ...("species" in column ? { name: column.species } : {}) })),
      correlations: values.map((value, i) => ({ of: [...(of[i] ?? ["", ""])] as [string, string], value })),
    });
  };

  it("are an error that names the columns and the rows: 0.9, 0.9 and −0.9 have the determinant −2.888 (1 + 2abc − a² − b² − c², by hand)", () => {
    expect(problemOf(declare(0.9, 0.9, -0.9), "correlations-impossible")).toMatchObject({
      severity: "error",
      field: "correlations",
      text: expect.stringContaining("MgO, SiO2, CaO cannot all hold together (in every row)") as string,
    });
    expect(problemOf(declare(0.9, 0.9, "rho"), "correlations-impossible").text).toContain("in 1 row, first in row 2");
  });

  it("are nothing to say of where they can: 0.9, 0.9, 0.7; all 1; two columns alone", () => {
    for (const values of [[0.9, 0.9, 0.7], [1, 1, 1], [-1], [0.7, 0.7]]) expect(problemsOf(declare(...values), "correlations-impossible")).toEqual([]);
    expect(problemsOf(declare(0.75, 0.75), "correlations-impossible")).toHaveLength(1);
    expect(problemsOf(declare(1, 1, 0.5), "correlations-impossible")).toHaveLength(1);
  });
});
