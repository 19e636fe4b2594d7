import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readCell } from "../../../cells/table";
import { seed } from "../../support/seed";

describe("cells of a quantity", () => {
  it.each<[string, number, number | null]>([
    ["45.0", 45, null],
    ["-1.5", -1.5, null],
    ["−1.5", -1.5, null],
    ["+0.3", 0.3, null],
    [" 12 ", 12, null],
    [".5", 0.5, null],
    ["5.", 5, null],
    ["1e3", 1000, null],
    ["1.2E-4", 1.2e-4, null],
    ["1.2 × 10^-4", 1.2e-4, null],
    ["0", 0, null],
    ["1.2 ± 0.1", 1.2, 0.1],
    ["1.2±0.1", 1.2, 0.1],
    ["1.2 +/- 0.1", 1.2, 0.1],
    ["45.02(13)", 45.02, 0.13],
    ["45.0(4)", 45, 0.4],
    ["450(12)", 450, 12],
    ["45.0(1.2)", 45, 1.2],
    ["1.234(5)e-3", 1.234e-3, 5e-6],
    ["45.0*", 45, null],
    ["45.0 †", 45, null],
    ["45.0 (a)", 45, null],
  ])("%s is %d ± %j", (text, value, sigma) => {
    const cell = readCell(text, ".");
    expect(cell.kind === "value" && [cell.value, cell.relative]).toEqual([value, false]);
    if (sigma === null) expect(cell.kind === "value" && cell.sigma).toBeNull();
    else expect(cell.kind === "value" && cell.sigma).toBeCloseTo(sigma, 14);
  });

  it("takes an uncertainty in per cent for a relative one", () => {
    expect(readCell("1.2 ± 5 %", ".")).toMatchObject({ kind: "value", value: 1.2, sigma: 5, relative: true });
    expect(readCell("1.2 ± 5%", ".")).toMatchObject({ relative: true });
  });

  it("takes a unit beside the number, and a footnote's mark", () => {
    const cell = readCell("1205 ppm", ".");
    expect(cell.kind === "value" && cell.unit?.symbol).toBe("µg/g");
    expect(readCell("45.0**", ".")).toMatchObject({ mark: "**" });
  });

  it.each(["", " ", "-", "–", "—", "n.d.", "N.D.", "nd", "n.a.", "NA", "N/A", "n. d.", "NaN", "null", "...", "not analysed", "n.m.", "#N/A"])(
    "%j is missing",
    (text) => {
      expect(readCell(text, ".")).toEqual({ kind: "missing" });
    },
  );

  it.each<[string, number | null]>([
    ["<0.01", 0.01],
    ["< 0.01", 0.01],
    ["≤0.01", 0.01],
    ["<=0.01", 0.01],
    ["<5", 5],
    ["b.d.l.", null],
    ["bdl", null],
    ["B.D.L.", null],
    ["BDL", null],
    ["b.d.", null],
    ["<LOD", null],
    ["< LOQ", null],
    ["below detection", null],
    ["tr.", null],
    ["<", null],
    ["bdl (<0.02)", 0.02],
    ["b.d.l. 0.02", 0.02],
  ])("%s is below detection, limit %j, and never 0", (text, limit) => {
    expect(readCell(text, ".")).toMatchObject({ kind: "below", limit });
  });

  it("reads the limit's own unit", () => {
    const cell = readCell("<5 ppm", ".");
    expect(cell.kind === "below" && [cell.limit, cell.unit?.symbol]).toEqual([5, "µg/g"]);
  });

  it.each<[string, string]>([
    ["1,234", "cell-ambiguous"],
    ["1,5", "cell-ambiguous"],
    ["1.234.567", "cell-not-a-number"],
    ["1 234", "cell-grouped"],
    ["1'234", "cell-grouped"],
    [">60", "cell-above"],
    ["<-1", "cell-limit"],
    ["<n.d.x", "cell-not-a-number"],
    ["#DIV/0!", "cell-spreadsheet-error"],
    ["#REF!", "cell-spreadsheet-error"],
    ["abc", "cell-not-a-number"],
    ["12 apples", "cell-not-a-number"],
    ["45.0-46.0", "cell-not-a-number"],
    ["1e999", "cell-not-a-number"],
    ["45.0(4) ± 0.4", "cell-two-sigmas"],
    ["0x1F", "cell-not-a-number"],
    ["Infinity", "cell-not-a-number"],
    ["12.3.2021", "cell-not-a-number"],
    ["1-Mar", "cell-not-a-number"],
  ])("%s is refused (%s) in a sentence that quotes it and says what to do", (text, code) => {
    const cell = readCell(text, ".");
    expect(cell.kind === "unreadable" && cell.code).toBe(code);
    expect(cell.kind === "unreadable" && cell.text).toContain(text.replace(/^</u, ""));
    expect(cell.kind === "unreadable" && cell.text).toMatch(/Amend it|Amend/u);
  });

  it("follows the decimal sign of the file", () => {
    expect(readCell("45,02", ",")).toMatchObject({ kind: "value", value: 45.02 });
    expect(readCell("45,02(13)", ",")).toMatchObject({ value: 45.02, sigma: 0.13 });
    expect(readCell("<0,05", ",")).toMatchObject({ kind: "below", limit: 0.05 });
    expect(readCell("1,2 ± 0,1", ",")).toMatchObject({ value: 1.2, sigma: 0.1 });
    expect(readCell("1,2e3", ",")).toMatchObject({ value: 1200 });
    expect(readCell("45.02", ",")).toMatchObject({ kind: "unreadable", code: "cell-ambiguous" });
    expect(readCell("1.234,5", ",")).toMatchObject({ kind: "unreadable", code: "cell-ambiguous" });
  });

  it("reads every number that a computer writes, to the bit", () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const cell = readCell(String(value), ".");
        expect(cell.kind === "value" && cell.value).toBe(value === 0 ? 0 : value);
      }),
      { seed, numRuns: 1000 },
    );
  });

  it("comes to a value, a state or a sentence, whatever is in it, and never to NaN", () => {
    fc.assert(
      fc.property(
        fc.oneof(fc.string({ unit: "grapheme", maxLength: 40 }), fc.stringMatching(/^[<>±+\-.,()0-9eE %bdlna]{0,20}$/u)),
        fc.constantFrom("." as const, "," as const),
        (text, decimal) => {
          const cell = readCell(text, decimal);
          if (cell.kind === "value") {
            expect(Number.isFinite(cell.value)).toBe(true);
            expect(cell.sigma === null || (Number.isFinite(cell.sigma) && cell.sigma >= 0)).toBe(true);
          }
          if (cell.kind === "below") expect(cell.limit === null || (Number.isFinite(cell.limit) && cell.limit >= 0)).toBe(true);
          if (cell.kind === "unreadable") expect(cell.text.length).toBeGreaterThan(20);
        },
      ),
      { seed, numRuns: 3000 },
    );
  });

  it("of any length takes no time", () => {
    const long = 200_000;
    const start = performance.now();
    for (const text of [`1${" ".repeat(long)}x`, `bdl${" ".repeat(long)}))`, `${"*".repeat(long)}x`, `1 ± ${"1".repeat(long)}x`, `1${"(a)".repeat(long)}x`]) {
      const cell = readCell(text, ".");
      expect(cell.kind === "unreadable" && cell.code).toBe("cell-not-a-number");
      expect(cell.kind === "unreadable" && cell.text.length).toBeLessThan(200);
    }
    expect(performance.now() - start).toBeLessThan(2000);
  });
});
