import { describe, expect, it } from "vitest";

import { logRatioDistance, nearest } from "../../../cells/data/nearest";
import { createEngine, readPageDocument } from "@/cells";
import { listBodies } from "../../../cells/species";
import { tableOf } from "../language/scopes";

const ln = (...values: number[]): number[] => values.map((value) => Math.log(value));

describe("the log-ratio distance", () => {
  it("is that of Aitchison's definition by pairs: √(Σ over pairs (ln xᵢ/xⱼ − ln yᵢ/yⱼ)² / D), worked with Math.log", () => {
    const [x, y] = [
      [0.1, 0.3, 0.2, 0.4],
      [0.25, 0.2, 0.35, 0.2],
    ] as const;
    let sum = 0;
    for (let i = 0; i < 4; i++) for (let j = i + 1; j < 4; j++) sum += (Math.log((x[i] ?? NaN) / (x[j] ?? NaN)) - Math.log((y[i] ?? NaN) / (y[j] ?? NaN))) ** 2;
    expect(logRatioDistance(ln(...x), ln(...y)).distance).toBeCloseTo(Math.sqrt(sum / 4), 13);
  });

  it("asks for ratios alone: totals and weights of the atoms do not matter", () => {
    const plain = logRatioDistance(ln(1, 2, 3), ln(3, 1, 2)).distance;
    expect(logRatioDistance(ln(7, 14, 21), ln(3, 1, 2)).distance).toBeCloseTo(plain, 13);
    expect(logRatioDistance(ln(1 / 24.3, 2 / 27, 3 / 28.1), ln(3 / 24.3, 1 / 27, 2 / 28.1)).distance).toBeCloseTo(plain, 13);
    expect(logRatioDistance(ln(1, 2, 3), ln(2, 4, 6)).distance).toBeCloseTo(0, 14);
  });

  it("is none over two components", () => {
    expect(logRatioDistance([0, 1, NaN], [0, 2, 1])).toEqual({ distance: NaN, shared: 2 });
  });
});

describe("bodies and samples nearest to a sample", () => {
  const table = tableOf({
    MgO: { value: [37.8, 36, 20, 37.8, null, 37.8] },
    SiO2: { value: [45, 46, 50, 45, 45, 45] },
    Al2O3: { value: [4.45, 4.2, 15, 4.45, 4.45, null] },
    CaO: { value: [3.55, 3.4, 10, 3.55, 3.55, "<"] },
  });

  it("a sample with the silicate Earth's oxides is nearest to it (McDonough & Sun 1995), and to the sample that is like it", () => {
    const found = nearest(table, 0, [table], listBodies());
    expect(found?.components).toEqual(["Mg", "Si", "Al", "Ca"]);
    expect(found?.bodies[0]).toMatchObject({ name: "BSE_MS95", used: ["Mg", "Si", "Al", "Ca"], missing: [] });
    expect(found?.bodies[0]?.distance).toBeLessThan(0.02);
    expect(found?.samples.map(({ name }) => name).slice(0, 2)).toEqual(["S4", "S5"]);
    expect(found?.samples[0]?.distance).toBeCloseTo(0, 12);
    expect(found?.samples.at(-1)?.name).toBe("S3");
  });

  it("names what is missing, compares over at least three elements and counts the others", () => {
    const found = nearest(table, 0, [table], []);
    expect(found?.samples.find(({ name }) => name === "S5")).toMatchObject({ used: ["Si", "Al", "Ca"], missing: ["Mg"], of: "ch", row: 5 });
    expect(found?.samples.some(({ name }) => name === "S6")).toBe(false);
    expect(found?.tooFew).toBe(1);
    expect(nearest(table, 5, [table], listBodies())).toBeNull();
    expect(nearest(table, 99, [table], [])).toBeNull();
  });

  it("leaves out rows set aside and the row itself in another table", () => {
    const aside = { ...table, setAside: Uint8Array.from([0, 0, 0, 1, 0, 0]) };
    expect(nearest(aside, 0, [aside], [])?.samples[0]?.name).not.toBe("S4");
    const stacked = { ...table, handle: "all" };
    expect(nearest(table, 0, [stacked], [])?.samples.map(({ name }) => name)).not.toContain("S1");
  });
});

describe("a page's engine, asked what a sample is nearest to", () => {
  const columns = [{ name: "Sample", role: "sample" }, ...["MgO", "SiO2", "Al2O3"].map((name) => ({ name, role: "quantity", species: name, unit: "wt%" }))];
  const rows = (...all: [string, number, number, number][]): object[] =>
    all.map(([Sample, MgO, SiO2, Al2O3], i) => ({ id: `r${i}`, cells: { Sample, MgO: String(MgO), SiO2: String(SiO2), Al2O3: String(Al2O3) } }));
  const engine = createEngine();
  engine.evaluate(
    readPageDocument({
      format: "cotectic-page/1",
      title: "Test page",
      blocks: [
        { id: "a", kind: "data", columns, typed: rows(["A1", 38, 45, 4.4], ["A2", 10, 50, 15]) },
        { id: "b", kind: "data", columns, typed: rows(["B1", 38, 45, 4.5]) },
        { id: "all", kind: "data", stack: ["a", "b"] },
      ],
    }),
  );

  it("compares the samples of all its tables, each where it was read, also from a stack", () => {
    expect(engine.nearest({ block: "a", index: 0 })?.samples).toMatchObject([
      { name: "B1", of: "b", row: "r0" },
      { name: "A2", of: "a", row: "r1" },
    ]);
    expect(engine.nearest({ block: "all", index: 0 })?.samples.map(({ of, name }) => `${of} ${name}`)).toEqual(["b B1", "a A2"]);
    expect(engine.nearest({ block: "nothing", index: 0 })).toBeNull();
    expect(createEngine().nearest({ block: "a", index: 0 })).toBeNull();
  });
});
