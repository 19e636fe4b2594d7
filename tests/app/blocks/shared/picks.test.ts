import { describe, expect, it } from "vitest";
import { originsOf, pickedIndices, rowLabel } from "@/app/_blocks/shared/picks";
import type { Table } from "@/cells";

const table: Table = {
  handle: "all",
  rows: 3,
  rowIds: [1, 2, "k3"],
  samples: ["A", "", "C"],
  classes: ["", "", ""],
  // The second row was merged of two.
  origins: [
    [{ table: "th", row: 7 }],
    [
      { table: "th", row: 8 },
      { table: "mx", row: 1 },
    ],
    [{ table: "mx", row: "k3" }],
  ],
  setAside: new Uint8Array(3),
  columns: [],
  correlations: [],
};

describe("picked rows", () => {
  it("are found by any of the rows they were made from", () => {
    expect(
      pickedIndices(table, [
        { table: "mx", row: 1 },
        { table: "th", row: 7 },
      ]),
    ).toEqual([0, 1]);
  });

  it("tell row 3 from the row named 3", () => {
    expect(pickedIndices(table, [{ table: "mx", row: 3 }])).toEqual([]);
    expect(pickedIndices(table, [{ table: "mx", row: "k3" }])).toEqual([2]);
  });

  it("give their origins back, each once", () => {
    expect(originsOf(table, [1, 1])).toEqual([
      { table: "th", row: 8 },
      { table: "mx", row: 1 },
    ]);
  });

  it("go by their sample, else by their row", () => {
    expect([0, 1].map((i) => rowLabel(table, i))).toEqual(["A", "row 2"]);
  });
});
