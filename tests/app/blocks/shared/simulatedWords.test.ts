import { describe, expect, it } from "vitest";
import { lineSimulated, quantilesInWords, wishInWords } from "@/app/_blocks/shared/simulatedWords";
import { createEngine, readPageDocument, type LineResult } from "@/cells";

function lineOf(text: string): LineResult | undefined {
  const engine = createEngine();
  engine.setSource("a.csv", new TextEncoder().encode("Sample,Mg (wt%),1s Mg,Si (wt%),1s Si\nS1,20,1,10,0.1\nS2,21,1,10,0.1\nS3,24,1,10,0.1\n"));
  const blocks = [
    { id: "ch", kind: "data", source: { file: "a.csv" } },
    { id: "r", kind: "formula", data: "ch", text, simulate: { draws: 500, seed: 1 } },
  ];
  const result = engine.evaluate(readPageDocument({ format: "cotectic-page/1", title: "", blocks })).blocks.get("r");
  return result?.kind === "formula" ? result.lines[0] : undefined;
}

describe("words of a simulation", () => {
  it("says ranges with the unit, and how it was drawn", () => {
    expect(quantilesInWords({ median: 2.1, from68: 1.4, to68: 3.4, from95: 1.1, to95: 5.2 }, "wt%")).toBe(
      "simulated: 68 % within 1.4 to 3.4, 95 % within 1.1 to 5.2\u2009wt%, median 2.1",
    );
    expect(quantilesInWords({ median: 0.0001236, from68: 0.00011, to68: 0.00014, from95: 0.0001, to95: 0.00016 }, "1")).toMatch(/, median 0\.000124$/u);
    expect(wishInWords({ draws: 20000, seed: 7 })).toBe("20,000 draws, seed 7");
  });

  it("says one value's ranges, and the usual width over samples", () => {
    const [single, many] = [lineOf("m = mean(Mg / Si)"), lineOf("r = Mg / Si")];
    expect(single === undefined ? "" : lineSimulated(single)).toMatch(/^simulated: 68 % within [\d.]+ to [\d.]+, 95 % within/u);
    expect(many === undefined ? "" : lineSimulated(many)).toMatch(/^simulated: median half-width 0\.[01]\d+ \(68 %\)$/u);
  });
});
