import { describe, expect, it } from "vitest";
import { fitsText, formulaLines, resultFor } from "@/app/_blocks/formula/lines";
import type { LineResult } from "@/cells";

function result(name: string, span: readonly [number, number]): LineResult {
  return {
    name,
    span,
    expressionSpan: span,
    ok: true,
    unit: "1",
    basis: null,
    remark: null,
    perSample: true,
    n: 0,
    states: {},
    value: new Float64Array(0),
    sigma: new Float64Array(0),
    sigmaCommon: new Float64Array(0),
    state: new Uint8Array(0),
    lowerBound: new Uint8Array(0),
    assumed: 0,
  };
}

describe("lines of a formula block", () => {
  const text = "# ratios\nmg_si = Mg / Si\n\n  `Al (wt%)` = Al\nSi == Mg\nétat = 1";

  it("are those that give a name, comments and comparisons are none", () => {
    expect(formulaLines(text).map((l) => l.name)).toEqual(["mg_si", "Al (wt%)", "état"]);
  });

  it("know where they and their names stand", () => {
    const second = formulaLines(text)[1];
    expect(text.slice(second?.from, second?.to)).toBe("  `Al (wt%)` = Al");
    expect(text.slice(second?.nameFrom, second?.nameTo)).toBe("`Al (wt%)`");
  });

  it("find the result of their name, the nth of several", () => {
    const lines = formulaLines("x = 1\nx = 2");
    const results = [result("x", [0, 5]), result("x", [6, 11])];
    expect(lines.map((line) => resultFor(line, results)?.span[0])).toEqual([0, 6]);
  });

  it("do not take results of an older text for their own", () => {
    const results = [result("x", [0, 5]), result("y", [6, 11])];
    expect(fitsText(formulaLines("x = 1\ny = 2"), results)).toBe(true);
    expect(fitsText(formulaLines("x = 1\nnew = 3\ny = 2"), results)).toBe(false);
  });
});
