import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { State } from "../../../cells/quantity/state";
import { massFactor, resolveSpecies, type Refused, type Resolved } from "../../../cells/species";
import { seed } from "../../support/seed";
import { tableOf } from "../language/scopes";

type Given = Parameters<typeof tableOf>[0];

function resolved(given: Given, name: string, extra: Parameters<typeof tableOf>[1] = {}): Resolved {
  const found = resolveSpecies(tableOf(given, extra), name);
  if (found?.ok !== true) throw new Error(`${name}: ${found === undefined ? "nothing" : found.text}`);
  return found;
}

function refused(given: Given, name: string): Refused {
  const found = resolveSpecies(tableOf(given), name);
  if (found === undefined || found.ok) throw new Error(`${name} was expected to be refused`);
  return found;
}

/** Values in wt% of what was chosen in each row; null where there is none. */
function values(of: Resolved): (number | null)[] {
  return [...of.state].map((state, row) => {
    if (state !== State.present) return null;
    const candidate = of.candidates[of.choice[row] ?? 0];
    return (candidate?.terms ?? []).reduce((sum, { column, factor }) => sum + factor * (column.value[row] ?? Number.NaN), 0) * 100;
  });
}

function near(actual: readonly (number | null)[], expected: readonly (number | null)[]): void {
  expect(actual.map((value) => value !== null)).toEqual(expected.map((value) => value !== null));
  actual.forEach((value, i) => value !== null && expect(value).toBeCloseTo(expected[i] ?? Number.NaN, 9));
}

const f = (from: string, to: string): number => massFactor(from, to) ?? Number.NaN;
const { present, missing, belowDetection, setAside } = State;

describe("which column a name means", () => {
  it("the one of its name, else a conversion from another of the element", () => {
    near(values(resolved({ Mg: { value: [9] } }, "Mg")), [9]);
    const converted = resolved({ MgO: { value: [38] } }, "Mg");
    near(values(converted), [38 * f("MgO", "Mg")]);
    expect(converted.candidates[0]?.sentence).toBe("Mg = MgO × 0.603042");
    near(values(resolved({ Ti: { unit: "µg/g", value: [1205] } }, "TiO2")), [0.20105150730148116]);
    expect(resolveSpecies(tableOf({ MgO: { value: [38] } }), "Si")).toBeUndefined();
  });

  it("as anyone spells it", () => {
    near(values(resolved({ MgO: { value: [38] } }, "MGO")), [38]);
    near(values(resolved({ SiO2: { value: [45] } }, "SiO₂")), [45]);
  });

  it("row by row: where one is missing the other stands in", () => {
    const of = resolved({ Mg: { value: [22, null, null, "<"] }, MgO: { value: [38, 38, null, null] } }, "Mg");
    near(values(of), [22, 38 * f("MgO", "Mg"), null, null]);
    expect([...of.state]).toEqual([present, present, missing, belowDetection]);
  });

  it("the one with a σ, where both have a value", () => {
    const given = { Mg: { value: [22.9, 22.9, 22.9] }, MgO: { value: [38, 38, 38], sigma: [0.4, null, 0.4] } };
    const of = resolved(given, "Mg");
    expect([...of.choice]).toEqual([1, 0, 1]);
    expect([...resolved(given, "MgO").choice]).toEqual([0, 0, 0]);
  });

  it("warns where two differ beyond their σ, naming rows, ways and values", () => {
    const given = { Mg: { value: [22.9, 20, 22], sigma: [0.2, 0.2, 0.2] }, MgO: { value: [38, 38, 38], sigma: [0.4, 0.4, 0.4] } };
    const [warning] = resolved(given, "Mg").warnings;
    expect(warning?.code).toBe("species-disagree");
    expect(warning?.text).toContain("2 rows");
    expect(warning?.text).toContain("S2 (row 2): Mg gives 20 wt%, Mg = MgO × 0.603042 gives 22.92 wt%");
    expect(resolved({ Mg: { value: [22.9], sigma: [0.2] }, MgO: { value: [38], sigma: [0.4] } }, "Mg").warnings).toEqual([]);
  });

  it("warns without any σ from 5 % on", () => {
    const differing = (mg: number): number => resolved({ Mg: { value: [mg] }, MgO: { value: [38] } }, "Mg").warnings.length;
    expect([differing(22.9), differing(22), differing(21), differing(26)]).toEqual([0, 0, 1, 1]);
  });

  it("keeps what is set aside out", () => {
    expect([...resolved({ MgO: { value: [38, 38, null] } }, "Mg", { setAside: [1, 2] }).state]).toEqual([present, setAside, setAside]);
  });

  it("a column that is named otherwise than its species means itself", () => {
    const of = resolved({ T: { unit: "K", value: [1400] } }, "T");
    expect([of.candidates.length, of.species, of.unit.symbol]).toEqual([1, undefined, "K"]);
    expect(resolved({ mg_mine: { species: "MgO", value: [38] } }, "Mg").candidates[0]?.sentence).toBe("Mg = mg_mine × 0.603042");
  });

  it("moles per mass convert; other units are refused with what to do", () => {
    // 1 mol/kg of Mg is 24.305 g/kg.
    near(values(resolved({ c: { unit: "mol/kg", species: "Mg", value: [1] } }, "Mg")), [2.4305]);
    const no = refused({ x: { unit: "at%", species: "Mg", value: [20] } }, "Mg");
    expect([no.code, no.column]).toEqual(["species-unit", "x"]);
    expect(no.text).toContain("at%");
  });

  it("never gives a number to a row that has none, whatever the columns", () => {
    const cell = fc.oneof(fc.double({ min: 0.1, max: 60, noNaN: true }), fc.constantFrom(null, "<" as const));
    const sigma = fc.option(fc.double({ min: 0.01, max: 1, noNaN: true }));
    const column = fc.record({ value: fc.array(cell, { minLength: 4, maxLength: 4 }), sigma: fc.array(sigma, { minLength: 4, maxLength: 4 }) });
    fc.assert(
      fc.property(column, column, (mg, mgo) => {
        const of = resolved({ Mg: mg, MgO: mgo }, "Mg");
        values(of).forEach((value, row) => {
          const having = [mg.value[row], mgo.value[row]].filter((x) => typeof x === "number").length;
          expect(value !== null).toBe(having > 0);
          const chosen = of.candidates[of.choice[row] ?? 0]?.terms[0]?.column;
          // Where either has a σ beside its value, the chosen one has.
          const knows = (c: typeof mg): boolean => typeof c.value[row] === "number" && typeof c.sigma[row] === "number";
          if (knows(mg) || knows(mgo)) expect(Number.isFinite(chosen?.sigma[row] ?? Number.NaN)).toBe(true);
        });
      }),
      { seed, numRuns: 300 },
    );
  });
});

describe("iron", () => {
  it("a total wins over the sum of parts, with or without a σ", () => {
    const parts = { FeO: { value: [8.34], sigma: [0.1] }, Fe2O3: { value: [2.06], sigma: [0.05] } };
    near(values(resolved({ FeOt: { value: [10.5] }, ...parts }, "Fe")), [10.5 * f("FeO", "Fe")]);
    near(values(resolved({ ...parts, Fe2O3t: { value: [12.3] } }, "FeOt")), [11.06766612185087]);
  });

  it("a total is never added to a part", () => {
    const of = resolved({ FeOt: { value: [10.5] }, Fe_metal: { value: [2] }, FeS: { value: [5] } }, "Fe_total");
    near(values(of), [10.5 * f("FeO", "Fe")]);
    for (const { terms } of of.candidates) {
      const names = terms.map(({ column }) => column.name);
      expect(names.includes("FeOt") && names.length > 1).toBe(false);
    }
  });

  it("parts are added, all that the table has, if none is missing in the row", () => {
    const given = {
      FeO: { value: [8, 8, null, 8] },
      Fe_metal: { value: [12, null, 12, "<" as const] },
      FeS: { value: [5, 5, 5, 5] },
    };
    const of = resolved(given, "Fe");
    near(values(of), [8 * f("FeO", "Fe") + 12 + 5 * f("FeS", "Fe"), null, null, null]);
    expect([...of.state]).toEqual([present, missing, missing, belowDetection]);
    expect(of.candidates[0]?.sentence).toBe("Fe = FeO × 0.777309 + Fe_metal + FeS × 0.635288");
  });

  it("FeO with Fe2O3 is the check value's (computed from IUPAC 2021 atomic weights)", () => {
    near(values(resolved({ FeO: { value: [8.34] }, Fe2O3: { value: [2.06] } }, "FeOt")), [10.193609122846569]);
  });

  it("a row whose total is missing is had from its parts, if all are there", () => {
    const of = resolved({ FeOt: { value: [10, null, null] }, FeO: { value: [8, 8, 8] }, Fe2O3: { value: [2, 2, null] } }, "FeOt");
    near(values(of), [10, 8 + 2 * f("Fe2O3", "FeO"), null]);
  });

  it.each(["Fe", "FeO", "Fe2O3"])("a bare %s must be told what it is", (bare) => {
    for (const asked of ["Fe", "FeOt", "Fe_total", bare]) {
      const no = refused({ [bare]: { value: [10] } }, asked);
      expect([no.code, no.column]).toEqual(["iron-untold", bare]);
      expect(no.text).toContain("Set its species in the data block to");
    }
  });

  it("once told, it counts", () => {
    near(values(resolved({ FeO: { species: "FeOt", value: [10] } }, "Fe")), [10 * f("FeO", "Fe")]);
    near(values(resolved({ FeO: { species: "FeOt", value: [10] } }, "FeO")), [10]);
    const part = refused({ FeO: { species: "FeO_ferrous", value: [10] } }, "Fe");
    expect(part.code).toBe("iron-part-only");
    near(values(resolved({ FeO: { species: "FeO_ferrous", value: [10] } }, "FeO")), [10]);
  });

  it("a bare Fe beside parts leaves them unadded, since it may hold them", () => {
    expect(refused({ Fe: { value: [20] }, FeO: { value: [8] }, Fe2O3: { value: [2] } }, "Fe_total").code).toBe("iron-untold");
  });

  it("a part asked for where only the total is known is refused", () => {
    const no = refused({ FeOt: { value: [10] } }, "Fe2O3");
    expect([no.code, no.column]).toEqual(["iron-total-only", "FeOt"]);
    expect(refused({ Fe_metal: { value: [10] } }, "Fe").code).toBe("iron-part-only");
  });

  it("is the same whatever the order of the columns, in every combination", () => {
    const forms = ["FeOt", "Fe2O3t", "FeO", "Fe2O3", "Fe_metal", "FeS"] as const;
    fc.assert(
      fc.property(fc.shuffledSubarray([...forms], { minLength: 1 }), (names) => {
        const given: Given = Object.fromEntries(names.map((name) => [name, { value: [forms.indexOf(name) + 1] }]));
        const sorted: Given = Object.fromEntries([...names].sort().map((name) => [name, { value: [forms.indexOf(name) + 1] }]));
        const [one, other] = [resolveSpecies(tableOf(given), "Fe"), resolveSpecies(tableOf(sorted), "Fe")];
        expect(one?.ok).toBe(other?.ok);
        if (one?.ok !== true || other?.ok !== true) return;
        const totals = names.filter((name) => name.endsWith("t"));
        // One total, or none: then the order of the columns decides nothing.
        if (totals.length < 2) near(values(one), values(other));
        if (totals.length > 0) expect(totals).toContain(one.candidates[one.choice[0] ?? 0]?.terms[0]?.column.name);
        const iron = names.filter((name) => totals.length === 0 || name === one.candidates[one.choice[0] ?? 0]?.terms[0]?.column.name);
        near(values(one), [iron.reduce((sum, name) => sum + (forms.indexOf(name) + 1) * f(name, "Fe"), 0)]);
      }),
      { seed, numRuns: 200 },
    );
  });
});

describe("sulphur", () => {
  it("in FeS counts once: a column of sulphur is not added to, and FeS stands in only where there is none", () => {
    const of = resolved({ S: { value: [2, null] }, FeS: { value: [5, 5] } }, "S");
    near(values(of), [2, 5 * f("FeS", "S")]);
    expect(of.candidates.every(({ terms }) => terms.length === 1)).toBe(true);
    expect(of.warnings).toEqual([]);
  });

  it("is had of FeS alone", () => {
    near(values(resolved({ FeS: { value: [5] } }, "S")), [5 * f("FeS", "S")]);
  });
});
