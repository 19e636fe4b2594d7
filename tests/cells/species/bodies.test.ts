import { readFileSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import {
  bodyLookup,
  condensationTemperature,
  elementsByCondensation,
  elementsOfBody,
  isFromMemory,
  listBodies,
  lookupBody,
  lookupPhase,
  speciesOfBody,
  type Body,
} from "../../../cells/species";
import { referenceFiles } from "../../../scripts/reference";

function body(id: string): Body {
  const found = lookupBody(id);
  if (found === undefined) throw new Error(`no body ${id}`);
  return found;
}

describe("reference compositions", () => {
  // Copied by hand out of the published tables; value and σ as the source has them.
  it.each<[id: string, species: string, value: number, unit: string, sigma: number | null, source: string]>([
    ["CI_MS95", "Mg", 96500, "µg/g", null, "McDonough & Sun 1995, Chem. Geol. 120, 223-253, Table 2"],
    ["CI_MS95", "Si", 106500, "µg/g", null, "McDonough & Sun 1995, Chem. Geol. 120, 223-253, Table 2"],
    ["CI_MS95", "La", 0.237, "µg/g", null, "McDonough & Sun 1995, Chem. Geol. 120, 223-253, Table 2"],
    ["CI_PLJ14", "Mg", 95400, "µg/g", 3816, "Palme, Lodders & Jones 2014, Treatise on Geochemistry 2nd ed., vol. 2"],
    ["CI_PLJ14", "Si", 107000, "µg/g", 3210, "Palme, Lodders & Jones 2014, Treatise on Geochemistry 2nd ed., vol. 2"],
    ["CI_PLJ14", "Al", 8400, "µg/g", 504, "Palme, Lodders & Jones 2014, Treatise on Geochemistry 2nd ed., vol. 2"],
    ["CI_PLJ14", "Fe", 186600, "µg/g", 7464, "Palme, Lodders & Jones 2014, Treatise on Geochemistry 2nd ed., vol. 2"],
    ["BSE_MS95", "SiO2", 45, "wt%", null, "McDonough & Sun 1995, Table 5"],
    ["BSE_MS95", "MgO", 37.8, "wt%", null, "McDonough & Sun 1995, Table 5"],
    ["BSE_MS95", "FeO", 8.05, "wt%", null, "McDonough & Sun 1995, Table 5"],
    ["BSE_PO14", "MgO", 36.77, "wt%", 0.44, "Palme & O'Neill 2014"],
    ["BSE_PO14", "SiO2", 45.4, "wt%", 0.3, "Palme & O'Neill 2014"],
    ["CORE_M01", "Si", 60000, "µg/g", null, "McDonough 2001 Table 1.2 (core)"],
    ["CV_WK88", "Al", 1.75, "wt%", null, "Wasson & Kallemeyn 1988, Phil. Trans. R. Soc. A 325, 535-544"],
    ["R_LF98", "Ca", 0.914, "wt%", null, "Lodders & Fegley 1998"],
    ["SUN_A09", "Mg", 7.6, "dex", 0.04, "Asplund et al. 2009, ARA&A 47, 481, Table 1"],
    ["SUN_A21", "Mg", 7.55, "dex", 0.03, "Asplund, Amarsi & Grevesse 2021, A&A 653, A141, Table 2"],
    ["CI_A21", "Si", 7.51, "dex", 0.01, "Asplund et al. 2021 quoting Palme et al. 2014"],
  ])("%s holds %s %d %s ± %j (%s)", (id, species, value, unit, sigma, source) => {
    const listed = body(id).values.find((entry) => entry.species === species);
    expect([listed?.value, listed?.unit, listed?.sigma]).toEqual([value, unit, sigma]);
    expect(listed?.source.startsWith(source)).toBe(true);
  });

  it("are all there, by id", () => {
    const ids = listBodies().map(({ id }) => id);
    expect(new Set(ids).size).toBe(ids.length);
    for (const id of ["CI_MS95", "CI_PLJ14", "CI_LPG09", "BSE_MS95", "BSE_PO14", "CORE_M01", "SUN_A09", "SUN_A21", "CI_A09", "CI_A21", "EH_WK88", "CH_LF98"])
      expect(ids).toContain(id);
  });

  it("have a source for every value, and σ above 0 or none", () => {
    for (const { kind, values } of listBodies())
      for (const value of values) {
        expect(value.source).not.toBe("");
        expect(Number.isFinite(value.canonical)).toBe(true);
        if (kind === "phase") expect(value.sigma).toBe(0);
        else expect(value.sigma === null || value.sigma > 0).toBe(true);
      }
  });

  it("say where a value was written down from memory", () => {
    expect([body("CI_MS95").fromMemory, body("CORE_M01").fromMemory, body("SUN_A09").fromMemory, body("forsterite").fromMemory]).toEqual([
      true,
      false,
      false,
      false,
    ]);
    expect([isFromMemory("from memory; confidence medium"), isFromMemory("read in a copy of the source")]).toEqual([true, false]);
  });

  it("are found by an alias of the page first, which leads to an id and to no other alias", () => {
    const find = bodyLookup({ CI: "CI_PLJ14", CI_MS95: "CI_LPG09", loop: "CI" });
    expect([find("CI")?.id, find("CI_PLJ14")?.id, find("CI_MS95")?.id, find("loop"), find("XX"), find("constructor"), find("__proto__")]).toEqual([
      "CI_PLJ14",
      "CI_PLJ14",
      "CI_LPG09",
      undefined,
      undefined,
      undefined,
      undefined,
    ]);
  });

  it("stand in the engine as their files have them", async () => {
    const folder = path.resolve("cells/species/reference");
    const made = await referenceFiles();
    expect(made.size).toBe(7);
    for (const [file, content] of made) expect(readFileSync(path.join(folder, file), "utf8")).toBe(content);
  });
});

describe("species of a body", () => {
  const value = (id: string, species: string): number | undefined => speciesOfBody(body(id), species)?.value;

  it("are converted where another species of the element is listed", () => {
    expect(value("CI_PLJ14", "Mg")).toBeCloseTo(0.0954, 14);
    expect(value("CI_PLJ14", "MgO")).toBeCloseTo(0.0954 * (40.304 / 24.305), 12);
    expect(speciesOfBody(body("CI_PLJ14"), "MgO")?.sentence).toMatch(/^MgO = Mg × 1\.6582/u);
    expect(speciesOfBody(body("CI_PLJ14"), "MgO")?.sigma).toBeCloseTo(0.003816 * (40.304 / 24.305), 12);
  });

  it("prefer the value that has a σ", () => {
    // Palme & O'Neill 2014 list Mg without a σ and MgO with one.
    expect(speciesOfBody(body("BSE_PO14"), "Mg")?.of.species).toBe("MgO");
    expect(speciesOfBody(body("BSE_MS95"), "Mg")?.of.species).toBe("Mg");
    expect(speciesOfBody(body("BSE_MS95"), "Mg")?.sigma).toBeNull();
  });

  it("take a body's iron for the total, and give no part of it", () => {
    const total = value("BSE_MS95", "FeO");
    expect(total).toBeCloseTo(0.0805, 12);
    expect(value("BSE_MS95", "FeOt")).toBe(total);
    expect(value("BSE_MS95", "Fe2O3t")).toBeCloseTo(0.0805 / 0.8998102538090137, 9);
    for (const part of ["Fe_metal", "FeS", "Fe2O3", "FeO_ferrous"]) expect(value("BSE_MS95", part)).toBeUndefined();
  });

  it("of a phase are 0 where its formula has none of the element, and exact", () => {
    expect(speciesOfBody(body("forsterite"), "Al")).toMatchObject({ value: 0, sigma: 0 });
    expect(value("forsterite", "SiO2")).toBeCloseTo(60.083 / 140.691, 12);
  });

  it("of a composition are not there where nothing is listed, never 0", () => {
    expect(value("CORE_M01", "Al2O3")).toBeUndefined();
    expect(value("CI_WK88", "Na")).toBeUndefined();
    expect(value("CI_PLJ14", "nonsense")).toBeUndefined();
  });

  it("of a phase by formula, too", () => {
    expect(lookupPhase("Forsterite")?.id).toBe("forsterite");
    expect(lookupPhase("Mg1.8Fe0.2SiO4")?.values.map(({ species }) => species)).toEqual(["Mg", "Fe", "Si", "O"]);
    expect(lookupPhase("CI_PLJ14")).toBeUndefined();
    expect(lookupPhase("Xx2O")).toBeUndefined();
  });

  it("by element, each once, for a mass balance", () => {
    const elements = elementsOfBody(body("BSE_MS95"));
    expect(elements.get("Si")?.value).toBeCloseTo(0.21, 12);
    expect([...elements.keys()]).not.toContain("O");
    const sum = [...elementsOfBody(body("diopside")).values()].reduce((total, { value }) => total + value, 0);
    expect(sum).toBeCloseTo(1, 14);
  });
});

describe("condensation temperatures (Lodders 2003, ApJ 591, 1220, Table 8; from memory)", () => {
  it("order elements from refractory to volatile", () => {
    expect([condensationTemperature("Mg")?.t50, condensationTemperature("Si")?.t50, condensationTemperature("S")?.t50]).toEqual([1336, 1310, 664]);
    const order = elementsByCondensation().map((element) => condensationTemperature(element)?.t50 ?? 0);
    expect(order.every((t, i) => i === 0 || t <= (order[i - 1] ?? 0))).toBe(true);
    expect(condensationTemperature("Xx")).toBeUndefined();
  });
});
