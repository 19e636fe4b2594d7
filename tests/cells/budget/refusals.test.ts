import { describe, expect, it } from "vitest";
import { emptyResult } from "../../../cells/page/emptyResult";
import { blockSchema, type Block } from "../../../cells/page/schema";
import { tableOf } from "../language/scopes";
import { errorIn, evaluate, type Surroundings } from "./budgets";

const start = { body: "BSE" };
const toCi = { expression: "Mg / Si", equals: { body: "CI" } };
const metal = (more: object = {}): object => ({ do: "share with metal", species: "Si", metalFraction: { value: 0.3 }, amount: { value: 5 }, ...more });
const add = (more: object = {}): object => ({ do: "add", what: { phase: "forsterite" }, amount: { value: 0.1 }, ...more });
const melt = (more: object = {}): object => ({ do: "extract melt", model: "batch", amount: { value: 0.1 }, coefficients: { La: 0.05 }, ...more });

const table = tableOf(
  { MgO: { value: [38, 37, null, 36] }, SiO2: { value: [45, 44, 43, 42] }, FeO: { value: [8, 8, 8, 8] }, Group: ["CV", "CV", "CO", "CM"] },
  { setAside: [3] },
);
const twice = { ...table, samples: ["A", "A", "B", "C"] };

interface Refusal {
  readonly because: string;
  readonly budget: object;
  readonly code: string;
  readonly field: string;
  /** What the sentence says, in order. */
  readonly says: RegExp;
  readonly around?: Surroundings;
}

const trendBlock: Block = blockSchema.parse({ kind: "trend", id: "t", data: "ch", x: "Mg / Si", y: "Al / Si", method: "york" });
const noTrend: Surroundings = { blocks: [trendBlock], results: { t: emptyResult(trendBlock, []) } };

const refusals: readonly Refusal[] = [
  { because: "unknown body", budget: { start: { body: "Moon" }, steps: [] }, code: "unknown-body", field: "start", says: /no body "Moon".*alias.*CI_PLJ14/u },
  {
    because: "solar abundances have no mass",
    budget: { start: { body: "SUN_A09" }, steps: [] },
    code: "dex-body",
    field: "start",
    says: /relative to hydrogen.*target of a ratio/u,
  },
  { because: "unknown phase", budget: { start: { phase: "Xy2" }, steps: [] }, code: "no-such-phase", field: "start", says: /"Xy2" is no phase.*forsterite/u },
  {
    because: "unknown element",
    budget: { start, steps: [add({ what: { element: "Xy" } })] },
    code: "no-such-element",
    field: "steps[0].what",
    says: /"Xy" is not/u,
  },
  {
    because: "a species that is none",
    budget: { start: { composition: { "Foo wt%": 3 } }, steps: [] },
    code: "no-such-species",
    field: "start",
    says: /"Foo".*SiO2 wt%/u,
  },
  {
    because: "no unit",
    budget: { start: { composition: { SiO2: 45 } }, steps: [] },
    code: "composition-unit",
    field: "start",
    says: /needs a unit.*SiO2 wt%/u,
  },
  {
    because: "a unit of moles",
    budget: { start: { composition: { "SiO2 mol%": 45 } }, steps: [] },
    code: "composition-unit",
    field: "start",
    says: /unit of mass/u,
  },
  {
    because: "a part of the iron",
    budget: { start: { composition: { "Fe_metal wt%": 5 } }, steps: [] },
    code: "iron-part-only",
    field: "start",
    says: /part of the iron.*FeOt/u,
  },
  {
    because: "an element twice",
    budget: { start: { composition: { "Si wt%": 20, "SiO2 wt%": 45 } }, steps: [] },
    code: "twice",
    field: "start",
    says: /Si is given twice/u,
  },
  {
    because: "more than everything",
    budget: { start: { composition: { "Si wt%": 120 } }, steps: [] },
    code: "over-100",
    field: "start",
    says: /120 wt%.*more than 100/u,
  },
  {
    because: "a negative part",
    budget: { start: { composition: { "Si wt%": -1 } }, steps: [] },
    code: "negative-amount",
    field: "start",
    says: /no negative parts/u,
  },
  { because: "nothing", budget: { start: { composition: {} }, steps: [] }, code: "empty-composition", field: "start", says: /empty.*SiO2 wt%/u },
  {
    because: "unknown sample",
    budget: { start: { data: "ch", sample: "X" }, steps: [] },
    code: "no-such-sample",
    field: "start",
    says: /ch has no sample "X"/u,
  },
  {
    because: "a name of two samples",
    budget: { start: { data: "ch", sample: "A" }, steps: [] },
    code: "ambiguous-sample",
    field: "start",
    says: /2 samples named "A", in rows 1, 2.*by its row/u,
    around: { tables: [twice] },
  },
  { because: "unknown row", budget: { start: { data: "ch", row: 9 }, steps: [] }, code: "no-such-row", field: "start", says: /no row 9/u },
  {
    because: "a sample set aside",
    budget: { start: { data: "ch", sample: "S4" }, steps: [] },
    code: "set-aside",
    field: "start",
    says: /S4 of ch is set aside/u,
  },
  {
    because: "unknown class",
    budget: { start: { data: "ch", class: "CI" }, steps: [] },
    code: "no-such-class",
    field: "start",
    says: /no sample of class "CI"/u,
  },
  {
    because: "a class set aside whole",
    budget: { start: { data: "ch", class: "CM" }, steps: [] },
    code: "no-such-class",
    field: "start",
    says: /no sample of class "CM" in use/u,
  },
  {
    because: "a class without complete case",
    budget: { start: { data: "ch", class: "CO" }, steps: [], report: ["Mg / Si"] },
    code: "no-complete-case",
    field: "start",
    says: /has all of Mg, Si/u,
  },
  {
    because: "two metal steps",
    budget: { start, steps: [metal(), metal()] },
    code: "two-metal-steps",
    field: "steps[1]",
    says: /Steps 1 and 2 both share with metal.*list all species/u,
  },
  {
    because: "two unknowns",
    budget: { start, steps: [add({ amount: "solve" }), metal({ amount: "solve" })], target: toCi },
    code: "two-unknowns",
    field: "steps[1].amount",
    says: /both solved for.*Fix one/u,
  },
  {
    because: "two ranges",
    budget: { start, steps: [add({ amount: { from: 0, to: 1 } }), metal({ amount: { from: 0, to: 1 } })] },
    code: "two-ranges",
    field: "steps[1].amount",
    says: /both sweep/u,
  },
  {
    because: "one solved, one swept",
    budget: { start, steps: [add({ amount: { from: 0, to: 1 } }), metal({ amount: "solve" })], target: toCi },
    code: "solve-and-range",
    field: "steps[1].amount",
    says: /one is solved for and the other swept/u,
  },
  {
    because: "a range and a target",
    budget: { start, steps: [add({ amount: { from: 0, to: 1 } })], target: toCi },
    code: "range-and-target",
    field: "steps[0].amount",
    says: /Solve for the amount, or take the target away/u,
  },
  { because: "no target", budget: { start, steps: [add({ amount: "solve" })] }, code: "no-target", field: "target", says: /Set a target/u },
  {
    because: "metal that is all or nothing",
    budget: { start, steps: [metal({ metalFraction: { value: 32.3 } })] },
    code: "metal-fraction",
    field: "steps[0].metalFraction",
    says: /32\.3.*between 0 and 1/u,
  },
  {
    because: "an oxide in metal",
    budget: { start, steps: [metal({ species: "SiO2" })] },
    code: "metal-species",
    field: "steps[0].species",
    says: /"SiO2" is none\. Write Si\./u,
  },
  {
    because: "no species in metal",
    budget: { start, steps: [metal({ species: "foo" })] },
    code: "metal-species",
    field: "steps[0].species",
    says: /Write the symbol/u,
  },
  {
    because: "a species twice",
    budget: { start, steps: [metal({ species: ["Si", "Si"] })] },
    code: "twice",
    field: "steps[0].species",
    says: /Si is listed twice/u,
  },
  {
    because: "more than all of the metal",
    budget: { start, steps: [metal({ amount: { value: 101 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /101 wt% is too much.*at most 100 wt%: there is no more room in the metal/u,
  },
  {
    because: "a negative amount",
    budget: { start, steps: [add({ amount: { value: -0.1 } })] },
    code: "negative-amount",
    field: "steps[0].amount",
    says: /-0\.1 kg\/kg.*not negative.*removing/u,
  },
  {
    because: "more than there is of an element",
    budget: { start, steps: [add({ do: "remove", amount: { value: 0.7 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /forsterite removed: 0\.7 kg\/kg is too much.*at most 0\.6\d+ kg\/kg: Mg is used up/u,
  },
  {
    because: "more than a mixture",
    budget: { start, steps: [add({ do: "mix", amount: { value: 1.2 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /1\.2 is too much.*at most 1: it is a fraction/u,
  },
  {
    because: "a range beyond what is possible",
    budget: { start, steps: [add({ do: "mix", amount: { from: 0, to: 2 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /2 is too much/u,
  },
  {
    because: "a range of one amount",
    budget: { start, steps: [add({ amount: { from: 0.1, to: 0.1 } })] },
    code: "empty-range",
    field: "steps[0].amount",
    says: /begins where it ends/u,
  },
  {
    because: "nothing left to add to",
    budget: { start, steps: [add({ do: "mix", amount: { value: 1 } }), add()] },
    code: "nothing-left",
    field: "steps[1].amount",
    says: /leaves nothing of the start/u,
  },
  {
    because: "all melted",
    budget: { start, steps: [melt({ amount: { value: 1 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /less than 1: a residue/u,
  },
  {
    because: "phases used up, 1 − PF/D ≤ 0",
    budget: { start, steps: [melt({ amount: { value: 0.3 }, meltCoefficients: { La: 0.2 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /less than 0\.25: 1 − PF\/D for La would not stay above 0/u,
  },
  {
    because: "phases used up, 1 − PF/D = 0",
    budget: { start, steps: [melt({ amount: { value: 0.25 }, meltCoefficients: { La: 0.2 } })] },
    code: "beyond-range",
    field: "steps[0].amount",
    says: /1 − PF\/D for La/u,
  },
  {
    because: "a coefficient of the melting phases alone",
    budget: { start, steps: [melt({ meltCoefficients: { Sm: 0.2 } })] },
    code: "coefficient-alone",
    field: "steps[0].meltCoefficients",
    says: /Sm has a coefficient for the melting phases and none for the solid/u,
  },
  {
    because: "a coefficient of nothing",
    budget: { start, steps: [melt({ coefficients: { foo: 1 } })] },
    code: "no-such-species",
    field: "steps[0].coefficients",
    says: /"foo" is no element/u,
  },
  {
    because: "an element with two coefficients",
    budget: { start, steps: [melt({ coefficients: { La: 0.1, La2O3: 0.1 } })] },
    code: "twice",
    field: "steps[0].coefficients",
    says: /La has two coefficients/u,
  },
  {
    because: "a ratio by mass against one by atoms",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Mg / Si", equals: { value: 1.07, basis: "atoms" } } },
    code: "basis-mismatch",
    field: "target.equals",
    says: /by mass.*stated by atoms.*1\.7308.*atoms\(Mg\)/u,
  },
  {
    because: "a ratio by atoms against one by mass",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "atoms(Mg) / atoms(Si)", equals: { value: 1.07, basis: "mass" } } },
    code: "basis-mismatch",
    field: "target.equals",
    says: /by atoms.*stated by mass/u,
  },
  {
    because: "a mass fraction of the Sun",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Mg", equals: { body: "SUN_A09" } } },
    code: "no-target-value",
    field: "target.equals",
    says: /relative to hydrogen.*Mg is none/u,
  },
  {
    because: "a target that the body does not give",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Mg / Ta", equals: { body: "CI_LPG09" } } },
    code: "no-target-value",
    field: "target.equals",
    says: /CI_LPG09 gives no Ta/u,
  },
  {
    because: "an expression that is none",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Mg / ", equals: { body: "CI" } } },
    code: "missing-operand",
    field: "target.expression",
    says: /.{10,}/u,
  },
  {
    because: "a reported expression that is none",
    budget: { start, steps: [add()], report: ["Mg / Qx"] },
    code: "unknown-name",
    field: "report[0]",
    says: /Qx/u,
  },
  {
    because: "a phase without the element that is to change",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Al / Ca", equals: { body: "CI" } } },
    code: "no-physical-solution",
    field: "steps[0].amount",
    says: /does not move what is aimed at/u,
  },
  {
    because: "a target that is met already by an amount that does not matter",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Al / Ca", equals: { body: "BSE" } } },
    code: "no-physical-solution",
    field: "steps[0].amount",
    says: /met already: every amount would do/u,
  },
  {
    because: "the wrong way round",
    budget: { start, steps: [add({ amount: "solve" })], target: toCi },
    code: "no-physical-solution",
    field: "steps[0].amount",
    says: /No possible amount of forsterite added brings Mg \/ Si to 0\.89159: it would take a negative amount, -0\.24334 kg\/kg/u,
  },
  {
    because: "out of reach whatever the amount",
    budget: { start, steps: [add({ amount: "solve" })], target: { expression: "Mg / Si", equals: { value: 3, basis: "mass" } } },
    code: "no-physical-solution",
    field: "steps[0].amount",
    says: /to 3: over all possible amounts it stays between 1\.\d+ and 1\.\d+ below the target/u,
  },
  {
    because: "what is aimed at is not known",
    budget: { start, steps: [metal({ amount: "solve" })], target: { expression: "Fe / Mg", equals: { body: "CI" } } },
    code: "no-physical-solution",
    field: "steps[0].amount",
    says: /The metal may hold Fe, and nothing says how much/u,
  },
  {
    because: "no such trend",
    budget: { start, steps: [add({ amount: "solve" })], target: { trend: "q" } },
    code: "no-such-block",
    field: "target.trend",
    says: /no block "q"/u,
  },
  {
    because: "a trend without a line",
    budget: { start, steps: [add({ amount: "solve" })], target: { trend: "t" } },
    code: "no-line",
    field: "target.trend",
    says: /t has no line.*See what t says/u,
    around: noTrend,
  },
];

describe("refusals", () => {
  it.each(refusals)("$because", ({ budget, code, field, says, around }) => {
    const result = evaluate(budget, { tables: [table], ...around });
    const error = errorIn(result);
    expect(error.code).toBe(code);
    expect(error.field).toBe(field);
    expect(error.text).toMatch(says);
    expect(error.text).toMatch(/[.!)]$/u);
    expect(error.text).not.toMatch(/NaN|undefined|Infinity|null/u);
    expect(result.solved).toBeUndefined();
    if (!field.startsWith("report")) expect(result.ok).toBe(false);
  });
});
