import { describe, expect, it } from "vitest";
import { countPage, countsInWords } from "@/app/_page/counts";
import { footnoteLetter, footnotesOf, lettersByPlace } from "@/app/_page/margin/footnotes";
import type { DataBlock, DataResult } from "@/cells";

const summary = { role: "quantity", unit: "wt%", n: 12, setAside: 0, withoutSigma: 0 };
const result: DataResult = {
  kind: "data",
  problems: [{ code: "x", severity: "error", text: "" }],
  bodiesUsed: {},
  samples: 14,
  setAside: 1,
  valuesSetAside: 1,
  amended: 1,
  proposed: false,
  columns: [
    { ...summary, name: "Na2O", missing: 1, belowDetection: 1, assumed: 0 },
    { ...summary, name: "Ir", missing: 2, belowDetection: 0, assumed: 12 },
  ],
  screening: [{ code: "total", row: 9, sample: "TH-09", text: "total 95.8, below 98.0" }],
};
const block: DataBlock = {
  id: "th",
  kind: "data",
  source: { file: "x.csv" },
  amendments: [{ row: 7, sample: "TH-07", column: "MgO", was: "42.1", value: "24.1", reason: "digits swapped", by: "u1", at: "2026-11-12T00:00:00Z" }],
  setAside: [
    { row: 11, sample: "TH-11", reason: "weathered" },
    { row: 3, sample: "TH-03", column: "CaO", reason: "carbonate" },
  ],
};

describe("what is counted on a page", () => {
  it("is said in words, tables made of tables left out", () => {
    const blocks = [
      { key: "1", order: "1", block },
      { key: "2", order: "2", block: { id: "all", kind: "data" as const, stack: ["th"] } },
    ];
    const results = {
      engine: "1",
      bodies: {},
      blocks: new Map([
        ["th", result],
        ["all", { ...result, problems: [] }],
      ]),
      readsFrom: new Map(),
    };
    expect(countsInWords(countPage(blocks, results))).toBe(
      "14 samples, 13 in use. 1 set aside, 1 value set aside, 1 amended, 3 missing, 1 below detection, 12 σ assumed. 1 problem.",
    );
  });

  it("says that there is nothing", () => {
    expect(countsInWords(countPage([], null))).toBe("No samples yet. No problems.");
  });
});

describe("footnotes", () => {
  it("have letters that go on after z", () => {
    expect([0, 25, 26, 27, 51, 52].map(footnoteLetter)).toEqual(["a", "z", "aa", "ab", "az", "ba"]);
  });

  it("tie amendments, set-asides and flags to their places", () => {
    const notes = footnotesOf(block, result);
    expect(notes.map((n) => `${n.letter} ${n.kind} ${n.title}`)).toEqual([
      "a amended from 42.1 to 24.1",
      "b set aside TH-11",
      "c value set aside TH-03, CaO only",
      "d screening TH-09",
    ]);
    expect([...lettersByPlace(notes)]).toEqual([
      ["7/MgO", "a"],
      ["11", "b"],
      ["3/CaO", "c"],
      ["9/total", "d"],
    ]);
  });
});
