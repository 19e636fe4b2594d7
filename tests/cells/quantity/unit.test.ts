import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fromCanonical, parseUnit, sigmaFromCanonical, sigmaToCanonical, toCanonical, units, type Unit } from "../../../cells/quantity/unit";
import { seed } from "../../support/seed";

const all: readonly Unit[] = Object.values(units);
const unit = fc.constantFrom(...all);
/** Numbers of any size that are held to full precision: below 1e-250 a conversion may lose digits, and nothing measured is as small. */
const number = fc
  .oneof(fc.double({ min: -1e12, max: 1e12, noNaN: true }), fc.double({ min: -1e-9, max: 1e-9, noNaN: true }), fc.constantFrom(0, 1, 45, 0.4))
  .map((value) => (Math.abs(value) < 1e-250 ? 0 : value));

function of(text: string): Unit {
  const found = parseUnit(text);
  if (found === undefined) throw new Error(`no unit ${text}`);
  return found;
}

describe("units people and laboratories write", () => {
  it.each<[symbol: string, spellings: readonly string[]]>([
    ["wt%", ["wt%", "wt. %", "wt.%", "WT%", "mass%", "mass %", "%", "weight percent", "Gew.-%", "g/100 g"]],
    ["g/kg", ["g/kg", "g kg-1"]],
    ["mg/g", ["mg/g"]],
    ["µg/g", ["µg/g", "μg/g", "ug/g", "µg g⁻¹", "mg/kg", "ppm", "PPM", "g/t"]],
    ["ng/g", ["ng/g", "ppb", "µg/kg"]],
    ["pg/g", ["pg/g", "ng/kg"]],
    ["mol%", ["mol%", "mole %"]],
    ["at%", ["at%", "at.%", "atomic %"]],
    ["mol/kg", ["mol/kg", "mol kg-1"]],
    ["atoms/10⁶ Si", ["atoms/10⁶ Si", "atoms per 10⁶ Si", "atoms per 10^6 Si", "Si=10^6"]],
    ["1", ["1", "ratio"]],
    ["‰", ["‰", "permil", "per mil"]],
    ["ε", ["ε", "epsilon"]],
    ["µ", ["µ", "μ"]],
    ["K", ["K", "kelvin"]],
    ["°C", ["°C", "deg C", "℃"]],
    ["GPa", ["GPa"]],
    ["kbar", ["kbar", "kb"]],
    ["bar", ["bar"]],
    ["g/cm³", ["g/cm³", "g/cm3", "g cm-3", "g/cc"]],
    ["Ma", ["Ma", "Myr"]],
    ["Ga", ["Ga", "Gyr"]],
    ["dex", ["dex"]],
    ["kg/kg", ["kg/kg"]],
  ])("%s", (symbol, spellings) => {
    for (const spelling of spellings) expect([spelling, parseUnit(spelling)?.symbol]).toEqual([spelling, symbol]);
  });

  it("are known by the symbol they are shown with, each with a code for export", () => {
    for (const [symbol, known] of Object.entries(units)) {
      expect(known.symbol).toBe(symbol);
      expect(parseUnit(symbol)).toBe(known);
      expect(known.ucum).toMatch(/^[!-~]+$/u);
    }
    expect(new Set(all.map(({ ucum }) => ucum)).size).toBe(all.length);
  });

  it.each(["", "furlong", "wt", "ppq", "mol", "SiO2", "constructor", "__proto__", "toString", "µg", "2", "%%"])("%j is none", (text) => {
    expect(parseUnit(text)).toBeUndefined();
  });
});

describe("conversion", () => {
  it.each<[number, string, number, string]>([
    [1, "wt%", 10, "mg/g"],
    [1, "wt%", 10000, "µg/g"],
    [45, "wt%", 450, "g/kg"],
    [1, "ppm", 1000, "ppb"],
    [1, "ng/g", 1000, "pg/g"],
    [0, "°C", 273.15, "K"],
    [1200, "°C", 1473.15, "K"],
    [1, "GPa", 10, "kbar"],
    [1, "kbar", 1000, "bar"],
    [4.567, "Ga", 4567, "Ma"],
    [1, "‰", 10, "ε"],
    [1, "ε", 100, "µ"],
    [1, "kg/kg", 100, "wt%"],
  ])("%d %s is %d %s", (value, from, to, in_) => {
    expect(of(from).dimension).toBe(of(in_).dimension);
    expect(fromCanonical(toCanonical(value, of(from)), of(in_))).toBeCloseTo(to, 8);
  });

  it("there and back changes no value beyond the last digits", () => {
    fc.assert(
      fc.property(unit, number, (in_, value) => {
        const back = fromCanonical(toCanonical(value, in_), in_);
        // An offset rounds at its own size.
        expect(Math.abs(back - value)).toBeLessThanOrEqual(4e-16 * (Math.abs(value) + in_.offset));
      }),
      { seed, numRuns: 3000 },
    );
  });

  it("through any other unit of the dimension comes to the same", () => {
    fc.assert(
      fc.property(unit, unit, number, (a, b, value) => {
        fc.pre(a.dimension === b.dimension);
        const through = fromCanonical(toCanonical(fromCanonical(toCanonical(value, a), b), b), a);
        expect(Math.abs(through - value)).toBeLessThanOrEqual(2e-15 * (Math.abs(value) + a.offset + b.offset));
      }),
      { seed, numRuns: 3000 },
    );
  });

  it("of a σ keeps its share of the value and knows no offset", () => {
    expect(sigmaToCanonical(5, units["°C"])).toBe(5);
    fc.assert(
      fc.property(unit, fc.double({ min: 1e-12, max: 1e6, noNaN: true }), (in_, sigma) => {
        const canonical = sigmaToCanonical(sigma, in_);
        expect(canonical).toBeGreaterThan(0);
        expect(Math.abs(sigmaFromCanonical(canonical, in_) / sigma - 1)).toBeLessThan(4e-16);
      }),
      { seed, numRuns: 1000 },
    );
  });

  it("is monotonous, and rounds once: 45.0 wt% is the number nearest to 0.45", () => {
    expect(toCanonical(45, units["wt%"])).toBe(0.45);
    expect(toCanonical(1205, units["µg/g"])).toBe(0.001205);
    fc.assert(
      fc.property(unit, number, number, (in_, a, b) => a > b || toCanonical(a, in_) <= toCanonical(b, in_)),
      { seed },
    );
  });
});
