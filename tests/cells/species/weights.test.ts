import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { pow } from "../../../cells/numeric";
import { atomicWeight, elementMassFraction, isElement, keyElement, lookupPhase, massFactor, oxides, parseChemical, parseSpecies } from "../../../cells/species";

interface Case {
  readonly id: string;
  readonly source: string;
  readonly expect: Readonly<Record<string, number>>;
}

/** Worked values, each with its source; they share no code with the product. */
const { cases } = JSON.parse(readFileSync("tests/reference/check-values.json", "utf8")) as { cases: readonly Case[] };

function worked(id: string): Case {
  const found = cases.find((entry) => entry.id === id);
  if (found === undefined) throw new Error(`no check value ${id}`);
  return found;
}

/** Checks one worked value to 1 in 10⁹, the tolerance the file states. */
function meets(of: Case, name: string, actual: number | undefined): void {
  const value = of.expect[name];
  if (value === undefined) throw new Error(`no value ${name} of ${of.id}`);
  expect(Math.abs((actual ?? Number.NaN) / value - 1)).toBeLessThan(1e-9);
}

const factor = (from: string, to: string): number => massFactor(from, to) ?? Number.NaN;
const weight = (element: string): number => atomicWeight(element) ?? Number.NaN;

describe("conversions between species", () => {
  const toRatio = worked("oxide-to-ratio");
  it(`oxide-to-ratio: ${toRatio.source}`, () => {
    const [mg, si] = [37.8 * factor("MgO", "Mg"), 45 * factor("SiO2", "Si")];
    meets(toRatio, "Mg wt%", mg);
    meets(toRatio, "Si wt%", si);
    meets(toRatio, "Mg/Si by mass", mg / si);
    meets(toRatio, "Mg/Si by atoms", mg / weight("Mg") / (si / weight("Si")));
  });

  const iron = worked("iron");
  it(`iron: ${iron.source}`, () => {
    meets(iron, "FeO per Fe2O3", factor("Fe2O3", "FeO"));
    meets(iron, "FeOt of 12.3 wt% Fe2O3t", 12.3 * factor("Fe2O3t", "FeOt"));
    meets(iron, "FeOt of 8.34 wt% FeO with 2.06 wt% Fe2O3", 8.34 + 2.06 * factor("Fe2O3", "FeO"));
  });

  const trace = worked("trace-to-oxide");
  it(`trace-to-oxide: ${trace.source}`, () => {
    const given: readonly (readonly [element: string, ugg: number, oxide: string])[] = [
      ["Ti", 1205, "TiO2"],
      ["Cr", 2625, "Cr2O3"],
      ["Mn", 1045, "MnO"],
      ["K", 240, "K2O"],
    ];
    for (const [element, ugg, oxide] of given) meets(trace, `${oxide} wt%`, (ugg / 1e4) * factor(element, oxide));
  });

  const forsterite = worked("forsterite");
  it(`forsterite: ${forsterite.source}`, () => {
    const chemical = lookupPhase("forsterite");
    const of = (element: string): number => chemical?.values.find((value) => value.species === element)?.canonical ?? Number.NaN;
    meets(forsterite, "Mg/Si by mass", of("Mg") / of("Si"));
    meets(forsterite, "Mg/Si by atoms", of("Mg") / weight("Mg") / (of("Si") / weight("Si")));
  });

  const sun = worked("sun-2009");
  it(`sun-2009: ${sun.source}`, () => {
    const atoms = pow(10, 7.6 - 7.51);
    meets(sun, "Mg/Si by atoms", atoms);
    meets(sun, "sigma", atoms * 2.302585092994046 * Math.sqrt(0.04 * 0.04 + 0.03 * 0.03));
    meets(sun, "Mg/Si by mass", (atoms * weight("Mg")) / weight("Si"));
  });

  it("go there and back", () => {
    for (const oxide of oxides) {
      const element = parseSpecies(oxide)?.element ?? "";
      expect(factor(oxide, element) * factor(element, oxide)).toBeCloseTo(1, 14);
      expect(factor(oxide, element)).toBeLessThan(1);
      expect(factor(oxide, oxide)).toBe(1);
    }
  });

  it("exist only between species of one element", () => {
    expect(massFactor("MgO", "Si")).toBeUndefined();
    expect(massFactor("MgO", "SiO2")).toBeUndefined();
    expect(massFactor("nonsense", "Si")).toBeUndefined();
    expect(massFactor("FeS", "S")).toBeCloseTo(32.06 / 87.905, 12);
    expect(massFactor("FeS", "Fe")).toBeCloseTo(55.845 / 87.905, 12);
  });
});

describe("atomic weights (CIAAW/IUPAC 2021)", () => {
  it.each([
    ["H", 1.008],
    ["O", 15.999],
    ["Na", 22.98976928],
    ["Mg", 24.305],
    ["Al", 26.9815384],
    ["Si", 28.085],
    ["S", 32.06],
    ["Ca", 40.078],
    ["Fe", 55.845],
    ["Ni", 58.6934],
  ])("%s is %d", (element, value) => {
    expect(atomicWeight(element)).toBe(value);
  });

  it("know elements as they are written, and nothing else", () => {
    expect([isElement("Mg"), isElement("MG"), isElement("mg"), isElement("Zz"), isElement("")]).toEqual([true, false, false, false, false]);
    expect(atomicWeight("constructor")).toBeUndefined();
  });
});

describe("formulas", () => {
  it.each<[string, Readonly<Record<string, number>>]>([
    ["SiO2", { Si: 1, O: 2 }],
    ["Mg1.8Fe0.2SiO4", { Mg: 1.8, Fe: 0.2, Si: 1, O: 4 }],
    ["CaMg(CO3)2", { Ca: 1, Mg: 1, C: 2, O: 6 }],
    ["Mg3(Si2O5)(OH)4", { Mg: 3, Si: 2, O: 9, H: 4 }],
    ["Fe", { Fe: 1 }],
  ])("%s", (formula, atoms) => {
    const chemical = parseChemical(formula);
    expect(Object.fromEntries(chemical?.atoms ?? [])).toEqual(atoms);
    const sum = Object.keys(atoms).reduce((total, element) => total + elementMassFraction(chemical ?? { formula, atoms: new Map(), weight: 1 }, element), 0);
    expect(sum).toBeCloseTo(1, 14);
  });

  it.each(["", "Xx2O", "sio2", "SiO2 ", "Si(O2", "SiO2)", "()2", "Si0", "2Si", "Si-O", "H2O+", "Si".repeat(60)])("%j is none", (formula) => {
    expect(parseChemical(formula)).toBeUndefined();
  });

  it("stand for one element, or for none", () => {
    const key = (formula: string): string | undefined => {
      const chemical = parseChemical(formula);
      return chemical === undefined ? undefined : keyElement(chemical);
    };
    expect([key("SiO2"), key("Mg"), key("H2O"), key("O"), key("FeS"), key("Mg2SiO4")]).toEqual(["Si", "Mg", "H", "O", undefined, undefined]);
  });
});

describe("species as people spell them", () => {
  it.each([
    ["SIO2", "SiO2"],
    ["SiO₂", "SiO2"],
    ["sio2", "SiO2"],
    ["MG", "Mg"],
    ["ZR", "Zr"],
    ["OS", "Os"],
    ["HO", "Ho"],
    ["FeO*", "FeOt"],
    ["FeOT", "FeOt"],
    ["Fe2O3 (total)", "Fe2O3t"],
    ["total Fe as FeO", "FeOt"],
    ["Fe metal", "Fe_metal"],
    ["troilite", "FeS"],
    ["Fe_total", "Fe_total"],
    ["ferric oxide", "Fe2O3_ferric"],
  ])("%s is %s", (text, name) => {
    expect(parseSpecies(text)?.name).toBe(name);
  });

  it.each(["", "Total", "Mg2SiO4", "LOI", "foo", "constructor", "__proto__", "Mg/Si"])("%j is none", (text) => {
    expect(parseSpecies(text)).toBeUndefined();
  });

  it("say of iron whether it is the whole, a part, or untold", () => {
    const forms = ["FeOt", "Fe2O3t", "Fe_total", "Fe_metal", "FeS", "Fe", "FeO", "Fe2O3", "Mg"].map((name) => parseSpecies(name)?.iron);
    expect(forms).toEqual(["total", "total", "total", "part", "part", "untold", "untold", "untold", undefined]);
  });
});
