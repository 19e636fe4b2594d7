import { describe, expect, it } from "vitest";
import { clipboardCells, isTable, pastedName } from "@/app/_blocks/data/clipboardTable";
import { columnsFromText } from "@/app/_blocks/data/columnWords";
import { between, movedBy } from "@/app/_blocks/data/gridKeys";
import { changedMapping, columnFault, mappingFault, storedColumns } from "@/app/_blocks/data/mapping";
import { freshRowId, typedFault, typedStored } from "@/app/_blocks/data/typedText";

describe("typed numbers", () => {
  it("are refused where a comma could mean two things", () => {
    expect(typedFault("1,234", true)).toBe("“1,234” can be read in two ways. Write 1234 if the comma parts thousands, or 1.234 if it is the decimal sign.");
    expect(typedFault("<1,234", true)).not.toBeNull();
    expect(typedFault("-12,345,678", true)).not.toBeNull();
    expect(typedFault("1,234(5)", true)).not.toBeNull();
  });
  it("stand where they can mean only one", () => {
    for (const text of ["1234", "1.234", "0,234", "1,23", "1,2345", "45.0 ± 0.4", "n.d.", ""]) expect(typedFault(text, true), text).toBeNull();
    expect(typedFault("Smith, 1,234", false)).toBeNull();
  });
  it("are stored with a point", () => {
    expect(typedStored(" 0,234 ", true)).toBe("0.234");
    expect(typedStored("<0,05", true)).toBe("<0.05");
    expect(typedStored("−1,5", true)).toBe("-1.5");
    expect(typedStored("a, b", false)).toBe("a, b");
  });
  it("get rows with ids of their own", () => {
    const ids = new Set(Array.from({ length: 200 }, freshRowId));
    expect(ids.size).toBe(200);
    for (const id of ids) expect(id.length).toBeLessThanOrEqual(40);
  });
});

describe("pasted tables", () => {
  it("keep quoted tabs, lines and quotes", () => {
    expect(clipboardCells('a\tb\r\n"x\ty"\t"says ""so"""\r\n')).toEqual([
      ["a", "b"],
      ["x\ty", 'says "so"'],
    ]);
    expect(clipboardCells("")).toEqual([]);
    expect(clipboardCells("a\t\n\tb")).toEqual([
      ["a", ""],
      ["", "b"],
    ]);
  });
  it("are told from a single value", () => {
    expect(isTable("24.1\n")).toBe(false);
    expect(isTable("24.1\t3")).toBe(true);
  });
  it("are kept under a name that says when", () => {
    expect(pastedName(new Date("2026-11-21T09:05:07Z"))).toBe("pasted-20261121-090507.tsv");
  });
});

describe("columns named in a line of text", () => {
  it("get role, species and unit", () => {
    expect(columnsFromText("Sample, Class, SiO2 (wt%), Ir [ng/g], T (°C), remark")).toEqual([
      { name: "Sample", role: "sample" },
      { name: "Class", role: "class" },
      { name: "SiO2", role: "quantity", species: "SiO2", unit: "wt%" },
      { name: "Ir", role: "quantity", species: "Ir", unit: "ng/g" },
      { name: "T", role: "quantity", unit: "°C" },
      { name: "remark", role: "text" },
    ]);
  });
});

describe("a mapping", () => {
  const columns = [
    { header: "Sample", role: "sample" as const },
    { header: "SiO2 (wt%)", name: "SiO2", role: "quantity" as const, species: "SiO2", unit: "wt%" },
    { header: "2s", role: "uncertainty" as const, of: "SiO2", as: "2 sigma" as const },
  ];
  it("says what is wrong with a column", () => {
    expect(mappingFault(columns)).toBeNull();
    expect(columnFault([...columns, { header: "x", name: "SiO2", role: "text" }], 3)).toMatch(/Two columns are called SiO2/);
    expect(columnFault([{ header: "a", role: "quantity", unit: "cups" }], 0)).toMatch(/unit cups is not known/);
    expect(columnFault([{ header: "a", role: "quantity", species: "Xx9" }], 0)).toMatch(/no species/);
    expect(columnFault([{ header: "a", role: "uncertainty", of: "b" }], 0)).toMatch(/Choose the quantity/);
    expect(mappingFault([columns[0] ?? { role: "sample" }, { header: "Id", role: "sample" }])).toMatch(/Two columns are taken as sample names/);
  });
  it("lets uncertainties follow their quantity", () => {
    const next = changedMapping({ columns, reasons: ["", "r", "r"] }, 1, { ...(columns[1] ?? { role: "quantity" }), name: "silica" });
    expect(next.columns[2]?.of).toBe("silica");
    expect(next.reasons).toEqual(["", "", "r"]);
  });
  it("is stored without names that repeat the header", () => {
    expect(storedColumns([{ header: "Sample", name: "Sample", role: "sample" }])).toEqual([{ header: "Sample", role: "sample" }]);
  });
});

describe("keys in a table", () => {
  const key = (k: string, ctrlKey = false) => ({ key: k, ctrlKey, metaKey: false });
  it("move and stop at the ends", () => {
    expect(movedBy(key("ArrowDown"), { row: 0, column: 1 }, 3, 4)).toEqual({ row: 1, column: 1 });
    expect(movedBy(key("ArrowUp"), { row: 0, column: 1 }, 3, 4)).toEqual({ row: 0, column: 1 });
    expect(movedBy(key("End", true), { row: 0, column: 1 }, 3, 4)).toEqual({ row: 2, column: 3 });
    expect(movedBy(key("PageDown"), { row: 0, column: 0 }, 100, 4)).toEqual({ row: 16, column: 0 });
    expect(movedBy(key("a"), { row: 0, column: 0 }, 3, 4)).toBeUndefined();
  });
  it("span ranges both ways", () => {
    expect(between(4, 2)).toEqual([2, 3, 4]);
  });
});
