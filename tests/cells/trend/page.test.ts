import { describe, expect, it } from "vitest";

import { createEngine, readPageDocument, type PageDocument, type PageResults, type TrendResult } from "@/cells";
import { resultsJson } from "../../../cells/page/resultsJson";

/** Two invented groups along two lines of Al/Si against Mg/Si, seven samples each. */
const rows = Array.from({ length: 14 }, (_, i) => {
  const [first, place] = [i < 7, i % 7];
  const x = first ? 0.7 + 0.05 * place : 1.05 + 0.05 * place;
  const y = (first ? 0.1 + 0.16 * (x - 1) : 0.105 - 0.12 * (x - 1)) * (1 + 0.004 * [1, -2, 2, 0, -1, 1, -1][place]!);
  const si = 20 + 0.1 * i;
  return {
    id: `r${i + 1}`,
    cells: {
      Sample: `S${i + 1}`,
      Group: first ? "CV" : "rock",
      Mg: String(si * x),
      sMg: String(si * x * 0.01),
      Al: String(si * y),
      sAl: String(si * y * 0.01),
      Si: String(si),
      sSi: String(si * 0.008),
    },
  };
});
const quantity = (name: string): object[] => [
  { name, header: name, role: "quantity", species: name, unit: "wt%" },
  { name: `s${name}`, header: `s${name}`, role: "uncertainty", of: name, as: "1 sigma" },
];
const ch = {
  id: "ch",
  kind: "data",
  typed: rows,
  columns: [{ name: "Sample", role: "sample" }, { name: "Group", role: "class" }, ...["Mg", "Al", "Si"].flatMap(quantity)],
};
const r = { id: "r", kind: "formula", data: "ch", text: "mg_si = Mg / Si\nal_si = Al / Si" };
const t = (id: string, fields: object): object => ({ id, kind: "trend", data: "ch", x: "mg_si", y: "al_si", method: "york", ...fields });
const CV = { where: 'Group == "CV"' };
const rock = { where: 'Group == "rock"' };

function page(...blocks: object[]): PageDocument {
  return readPageDocument({ format: "cotectic-page/1", title: "Test page", bodies: { CI: "CI_PLJ14", BSE: "BSE_MS95" }, blocks });
}

function trendOf(results: PageResults, handle: string): TrendResult {
  const result = results.blocks.get(handle);
  if (result?.kind !== "trend") throw new Error(`${handle} is no trend`);
  return result;
}

describe("trends on a page", () => {
  const results = createEngine().evaluate(page(ch, r, t("a", { ...CV, crossWith: "b" }), t("b", { ...rock, crossWith: "a" })));

  it("may each be crossed with the other, and cross in one place with one covariance", () => {
    const [a, b] = [trendOf(results, "a"), trendOf(results, "b")];
    expect(a.problems.filter((problem) => problem.severity === "error")).toEqual([]);
    if (a.crossing === undefined || b.crossing === undefined) throw new Error("no crossing");
    expect(a.crossing.with).toBe("b");
    expect(b.crossing.with).toBe("a");
    expect(b.crossing.x.value).toBeCloseTo(a.crossing.x.value, 12);
    expect(b.crossing.y.value).toBeCloseTo(a.crossing.y.value, 12);
    expect(b.crossing.x.sigma).toBeCloseTo(a.crossing.x.sigma ?? NaN, 12);
    expect(b.crossing.covariance).toBeCloseTo(a.crossing.covariance, 14);
  });

  it("follow lines of formulas: the x–y error correlation of the points is that of the shared silicon", () => {
    // ρ = σ²(Si) / √((σ²(Mg) + σ²(Si)) (σ²(Al) + σ²(Si))), relative σ of 1, 1 and 0.8 %.
    const expected = 0.8 ** 2 / (1 + 0.8 ** 2);
    for (const point of trendOf(results, "a").points) expect(point.correlation).toBeCloseTo(expected, 9);
  });

  it("leave the engine without NaN: JSON has numbers or null, and no hidden fit", () => {
    const text = JSON.stringify(resultsJson(results));
    expect(text).not.toContain("NaN");
    const json = (JSON.parse(text) as { blocks: Record<string, { slope: { value: number }; crossing: { fromBodies: { body: string }[] } }> }).blocks["a"];
    expect(json?.slope.value).toBe(trendOf(results, "a").slope?.value);
    expect(json?.crossing.fromBodies.map((each) => each.body)).toEqual(["CI", "BSE"]);
    expect(text).not.toContain("influence");
  });

  it("are not calculated again when another block changes, and are when a sample is left out", () => {
    const engine = createEngine();
    const before = engine.evaluate(page(ch, r, t("a", CV), t("b", { ...rock, crossWith: "a" })));
    const same = engine.evaluate(page(ch, r, t("a", CV), t("b", { ...rock, crossWith: "a" }), { id: "n", kind: "note", text: "new" }));
    expect(same.blocks.get("a")).toBe(before.blocks.get("a"));
    expect(same.blocks.get("b")).toBe(before.blocks.get("b"));
    const left = engine.evaluate(page(ch, r, t("a", { ...CV, leaveOut: [{ row: "r2", sample: "S2", reason: "test" }] }), t("b", { ...rock, crossWith: "a" })));
    expect(trendOf(left, "a").n).toBe(6);
    expect(trendOf(left, "b").crossing?.x.value).not.toBe(trendOf(before, "b").crossing?.x.value);
    expect(trendOf(left, "b").slope?.value).toBe(trendOf(before, "b").slope?.value);
  });

  it("give the same bits whatever was calculated before", () => {
    const engine = createEngine();
    engine.evaluate(page(ch, r, t("a", { ...rock, crossWith: "b" }), t("b", CV)));
    engine.evaluate(page(ch, { ...r, text: "mg_si = Al / Si\nal_si = Mg / Si" }, t("a", { ...CV, crossWith: "b" }), t("b", rock)));
    const after = engine.evaluate(page(ch, r, t("a", { ...CV, crossWith: "b" }), t("b", { ...rock, crossWith: "a" })));
    expect(JSON.stringify(resultsJson(after))).toBe(JSON.stringify(resultsJson(results)));
  });

  it("take part in each other only where it can be said: a formula may use a.slope", () => {
    const used = createEngine().evaluate(page(ch, r, t("a", CV), { id: "q", kind: "formula", data: "ch", text: "along = al_si - a.slope * mg_si" }));
    const q = used.blocks.get("q");
    expect(q?.problems).toEqual([]);
  });
});
