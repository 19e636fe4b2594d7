import { describe, expect, it } from "vitest";
import { createEngine, readPageDocument, type PageResults, type Problem } from "@/cells";

const typed = {
  typed: [{ id: "r1", cells: { Sample: "A", MgO: "24.1", SiO2: "36.7", Al2O3: "2.1" } }],
  columns: [{ name: "Sample", role: "sample" }, ...["MgO", "SiO2", "Al2O3"].map((name) => ({ name, role: "quantity", species: name, unit: "wt%" }))],
};

function evaluate(...blocks: object[]): PageResults {
  return createEngine().evaluate(readPageDocument({ format: "cotectic-page/1", title: "Test page", bodies: { CI: "CI_PLJ14" }, blocks }));
}

function problemsOf(results: PageResults, handle: string): readonly Problem[] {
  return results.blocks.get(handle)?.problems ?? [];
}

describe("what a page's names mean", () => {
  it("calculates whatever the order of the blocks", () => {
    const results = evaluate(
      { id: "r", kind: "formula", data: "ch", text: "double = 2 * mg_si" },
      { id: "q", kind: "formula", data: "ch", text: "mg_si = Mg / Si" },
      { id: "ch", kind: "data", ...typed },
    );
    expect(problemsOf(results, "r")).toEqual([]);
    expect(results.readsFrom.get("r")).toEqual(["ch", "q"]);
  });

  it("says which block is not there, and calculates the rest", () => {
    const results = evaluate(
      { id: "ch", kind: "data", ...typed },
      { id: "r", kind: "formula", data: "gone", text: "a = Mg / Si" },
      { id: "s", kind: "formula", data: "ch", text: "a = Mg / Si" },
    );
    expect(problemsOf(results, "r")).toHaveLength(1);
    expect(problemsOf(results, "r")[0]).toMatchObject({ code: "no-such-block", severity: "error", block: "r", field: "data" });
    expect(problemsOf(results, "s")).toEqual([]);
  });

  it("says when a handle means a block of another kind", () => {
    const results = evaluate({ id: "n", kind: "note", text: "" }, { id: "r", kind: "formula", data: "n", text: "a = Mg / Si" });
    expect(problemsOf(results, "r")[0]?.text).toBe('data needs a data block, and "n" is a note. Choose a data block.');
  });

  it("still finds a block by a former handle", () => {
    const results = evaluate({ id: "finds", formerly: ["ch"], kind: "data", ...typed }, { id: "r", kind: "formula", data: "ch", text: "a = Mg / Si" });
    expect(problemsOf(results, "r")).toEqual([]);
    expect(results.readsFrom.get("r")).toEqual(["finds"]);
  });

  it("refuses a name that two lines have", () => {
    const results = evaluate(
      { id: "ch", kind: "data", ...typed },
      { id: "r", kind: "formula", data: "ch", text: "a = Mg / Si" },
      { id: "q", kind: "formula", data: "ch", text: "a = Al / Si" },
      { id: "s", kind: "formula", data: "ch", text: "b = 2 * a" },
    );
    expect(problemsOf(results, "s")[0]?.code).toBe("ambiguous-name");
    expect(problemsOf(results, "r")).toEqual([]);
  });
});

describe("circles", () => {
  it("are named at each line that stands in one, and the other lines calculate", () => {
    const text = "a = 2 * b\nb = a + c\nc = Mg / Si";
    const results = evaluate({ id: "ch", kind: "data", ...typed }, { id: "r", kind: "formula", data: "ch", text });
    expect(problemsOf(results, "r").map((problem) => [problem.code, problem.span && text.slice(problem.span[0], problem.span[1])])).toEqual([
      ["circle", "2 * b"],
      ["circle", "a + c"],
    ]);
    const result = results.blocks.get("r");
    expect(result?.kind === "formula" && result.lines.map((line) => line.ok)).toEqual([false, false, true]);
  });

  it("between tables leave both without a result", () => {
    const results = evaluate({ id: "a", kind: "data", stack: ["b"] }, { id: "b", kind: "data", stack: ["a"] });
    expect(problemsOf(results, "a")[0]).toMatchObject({ code: "circle", severity: "error" });
    expect(problemsOf(results, "b")[0]).toMatchObject({ code: "circle", severity: "error" });
  });

  it("are not seen where a formula uses the slope of a trend through another of its own lines", () => {
    const rows = [1, 2, 3, 4].map((i) => ({
      id: `r${i}`,
      cells: { Sample: `S${i}`, MgO: `${20 + i} ± 0.2`, SiO2: "36.0 ± 0.3", Al2O3: `${2 + i / 4} ± 0.1` },
    }));
    const results = evaluate(
      { id: "ch", kind: "data", ...typed, typed: rows },
      { id: "t", kind: "trend", data: "ch", x: "mg_si", y: "al_si", method: "york" },
      { id: "r", kind: "formula", data: "ch", text: "mg_si = Mg / Si\nal_si = Al / Si\nover = al_si - t.slope * mg_si - t.intercept" },
    );
    expect(problemsOf(results, "r").filter((problem) => problem.severity === "error")).toEqual([]);
    expect(problemsOf(results, "t").filter((problem) => problem.severity === "error")).toEqual([]);
  });
});
