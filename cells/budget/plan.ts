import { CellError } from "../errors";
import type { CommonVariable } from "../language";
import type { Amount, BudgetBlock, Step } from "../page/schema";
import { isElement, parseSpecies } from "../species";
import { addition, mixing, removal } from "./addition";
import { exact, plain, type LinearForm } from "./algebra";
import { extraction, requirePaired, type Parting } from "./melting";
import { sharing } from "./metal";
import { inField } from "./place";
import { bodySubstance, input, readSubstance, type Access } from "./readSubstance";
import type { Deed, Stand } from "./state";
import { settled, type Settle, type Substance } from "./substance";

/** Where the amount comes from that a budget varies, if it varies one. */
export type Varying =
  | { readonly how: "solve"; readonly step: number }
  | { readonly how: "sweep"; readonly step: number; readonly from: number; readonly to: number }
  | { readonly how: "none" };

/** A budget's start and steps, read. */
export interface Plan {
  readonly start: Substance;
  readonly varying: Varying;
  /** Each step with its amount; undefined for the amount that is solved for or swept. */
  readonly steps: readonly { readonly deed: Deed; readonly amount: LinearForm | undefined }[];
  /** The same with plain numbers, for the many points of a path. */
  readonly plain: Plan | undefined;
  /** The same with numbers settled in another way: for draws. */
  settled(settle: Settle): Plan;
}

/** @throws CellError in the field concerned */
export function planOf(block: BudgetBlock, access: Access): Plan {
  const varying = varyingOf(block);
  const start = inField("start", () => readSubstance(block.start, access));
  const read = block.steps.map((step, i) => {
    const field = `steps[${i}]`;
    return { make: deedOf(step, field, access), amount: amountOf(step, field) };
  });
  const under = (settle: Settle): Plan => ({
    start: settled(start, settle),
    varying,
    steps: read.map(({ make, amount }) => ({ deed: make(settle), amount: amount === undefined ? undefined : settle(amount) })),
    plain: undefined,
    settled: under,
  });
  const whole = read.map(({ make, amount }) => ({ deed: make((form) => form), amount }));
  return { start, varying, steps: whole, plain: under(plain), settled: under };
}

/** Looks that one amount at most varies and one step at most shares with metal. */
function varyingOf(block: BudgetBlock): Varying {
  let varying: Varying = { how: "none" };
  let metal = -1;
  block.steps.forEach(({ amount, ...step }, i) => {
    const field = `steps[${i}].amount`;
    if (step.do === "share with metal") {
      if (metal >= 0)
        throw new CellError("two-metal-steps", `Steps ${metal + 1} and ${i + 1} both share with metal. A budget has one such step; list all species in it.`, {
          field: `steps[${i}]`,
        });
      metal = i;
    }
    if (typeof amount === "object" && "value" in amount) return;
    const how = amount === "solve" ? "solve" : "sweep";
    if (varying.how === "solve" && how === "solve")
      throw new CellError("two-unknowns", `Steps ${varying.step + 1} and ${i + 1} are both solved for, and one target gives one amount. Fix one of them.`, {
        field,
      });
    if (varying.how === "sweep" && how === "sweep")
      throw new CellError("two-ranges", `Steps ${varying.step + 1} and ${i + 1} both sweep a range, and a path has one amount. Fix one of them.`, { field });
    if (varying.how !== "none")
      throw new CellError("solve-and-range", `Steps ${varying.step + 1} and ${i + 1}: one is solved for and the other swept. Fix one of them.`, { field });
    varying = amount === "solve" ? { how: "solve", step: i } : { how: "sweep", step: i, from: amount.from, to: amount.to };
  });
  const found = varying as Varying;
  if (found.how === "sweep" && block.target !== undefined)
    throw new CellError("range-and-target", "A range is swept and a target is set. Solve for the amount, or take the target away.", {
      field: `steps[${found.step}].amount`,
    });
  if (found.how === "solve" && block.target === undefined)
    throw new CellError("no-target", "The amount is to be solved for, and nothing says what it must reach. Set a target.", { field: "target" });
  return found;
}

function amountOf(step: Step, field: string): LinearForm | undefined {
  const { amount } = step;
  if (amount === "solve" || "from" in amount) return undefined;
  return input(given(`${field}.amount`, `amount of step ${Number(/\d+/u.exec(field)?.[0] ?? 0) + 1} (${step.do})`, amount));
}

/** A number typed in the block as an input: without σ, its σ is unknown. */
export function given(key: string, label: string, amount: Extract<Amount, { value: number }>): CommonVariable {
  return { key: `typed:${key}`, label, value: amount.value, sigma: amount.sigma ?? Number.NaN };
}

/** A step, read: made with its numbers as they are, or settled. */
type MakeDeed = (settle: Settle) => Deed;

function deedOf(step: Step, field: string, access: Access): MakeDeed {
  switch (step.do) {
    case "add":
    case "remove":
    case "mix": {
      const what = inField(`${field}.what`, () => readSubstance(step.what, access));
      const make = step.do === "add" ? addition : step.do === "remove" ? removal : mixing;
      return (settle) => make(settled(what, settle), field);
    }
    case "share with metal":
      return metalDeed(step, field, access);
    case "extract melt":
      return meltDeed(step, field, access);
  }
}

function metalDeed(step: Extract<Step, { do: "share with metal" }>, field: string, access: Access): MakeDeed {
  const species = typeof step.species === "string" ? [step.species] : step.species;
  for (const [i, element] of species.entries()) {
    if (!isElement(element)) {
      const meant = parseSpecies(element)?.element;
      throw new CellError(
        "metal-species",
        `Metal shares elements, and "${element}" is none.${meant === undefined ? " Write the symbol, as in Si." : ` Write ${meant}.`}`,
        { field: `${field}.species` },
      );
    }
    if (species.indexOf(element) !== i) throw new CellError("twice", `${element} is listed twice. List each element once.`, { field: `${field}.species` });
  }
  const f = step.metalFraction.value;
  if (!(f > 0 && f < 1))
    throw new CellError("metal-fraction", `The metal's share of the whole is ${f}. It must lie between 0 and 1: 0.323 is 32.3 % of the mass.`, {
      field: `${field}.metalFraction`,
    });
  const fraction = input(given(`${field}.metalFraction`, "metal's share of the whole", step.metalFraction));
  const { rest } = step;
  const filling = rest === undefined ? undefined : inField(`${field}.rest`, () => bodySubstance(rest.body, access));
  if (species.length > 1)
    access.note(`The amount is that of each of ${species.join(", ")} in the metal: together they are ${species.length} times as much of it.`);
  return (settle) => sharing(species, settle(fraction), filling === undefined ? undefined : settled(filling, settle), field);
}

function meltDeed(step: Extract<Step, { do: "extract melt" }>, field: string, access: Access): MakeDeed {
  const solid = coefficientsOf(step.coefficients, `${field}.coefficients`, "D");
  const liquid = coefficientsOf(step.meltCoefficients ?? {}, `${field}.meltCoefficients`, "P");
  const partings = new Map<string, Parting>();
  for (const [element, D] of solid) {
    const P = liquid.get(element);
    partings.set(element, { D, ...(P === undefined ? {} : { P }) });
  }
  requirePaired(partings, liquid.keys(), `${field}.meltCoefficients`);
  const written = step.melt;
  const melt = written === undefined ? undefined : inField(`${field}.melt`, () => readSubstance(written, access));
  return (settle) => {
    const own = new Map([...partings].map(([element, { D, P }]) => [element, { D: settle(D), ...(P === undefined ? {} : { P: settle(P) }) }]));
    return extraction({ model: step.model, partings: own, ...(melt === undefined ? {} : { melt: settled(melt, settle) }) }, field);
  };
}

function coefficientsOf(written: Readonly<Record<string, number>>, field: string, letter: "D" | "P"): Map<string, LinearForm> {
  const found = new Map<string, LinearForm>();
  for (const [key, value] of Object.entries(written)) {
    const element = parseSpecies(key)?.element;
    if (element === undefined) throw new CellError("no-such-species", `"${key}" is no element or oxide. Write it as in La or TiO2.`, { field });
    if (found.has(element)) throw new CellError("twice", `${element} has two coefficients. Give it one.`, { field });
    // A coefficient has no σ to be given, so it is an input of unknown σ and not an exact number.
    found.set(element, input({ key: `typed:${field}:${element}`, label: `${letter} of ${element}`, value, sigma: Number.NaN }));
  }
  return found;
}

const full: LinearForm = exact(1);

/** The stand of a budget before its first step: 1 kg of the start. */
export function standAtStart(plan: Plan): Stand {
  return { ...plan.start, mass: full, parcels: [] };
}

/**
 * Goes through the steps.
 *
 * @param amount of the step that varies; not used where none does
 * @param unchecked true to calculate amounts that are not possible too, for saying what it would take
 * @throws CellError where a step cannot be done by as much as it should
 */
export function follow(plan: Plan, amount: LinearForm, unchecked = false, until = plan.steps.length): Stand {
  let stand = standAtStart(plan);
  for (const [i, { deed, amount: own }] of plan.steps.entries()) {
    if (i >= until) break;
    const by = own ?? amount;
    if (!unchecked) requirePossible(deed, stand, by.value);
    stand = deed.apply(stand, by);
  }
  return stand;
}

/** Rounding by which an amount may lie beyond its limit. */
const ROUNDING = 1e-12;

function requirePossible(deed: Deed, before: Stand, amount: number): void {
  const field = `${deed.field}.amount`;
  const unit = deed.unit === "1" ? "" : ` ${deed.unit}`;
  if (!(amount >= 0))
    throw new CellError(
      "negative-amount",
      `${deed.of}: the amount is ${amount}${unit}. An amount is not negative; turn adding into removing, or the other way round.`,
      {
        field,
      },
    );
  if (!Number.isFinite(before.mass.value))
    throw new CellError("nothing-left", `${deed.of}: the step before leaves nothing of the start, so no amount per kg of it can be told.`, { field });
  const range = deed.range(before);
  const possible = range.isClosed ? amount <= range.to * (1 + ROUNDING) : amount < range.to;
  if (!possible)
    throw new CellError(
      "beyond-range",
      `${deed.of}: ${shown(amount)}${unit} is too much. It can be ${range.isClosed ? "at most" : "less than"} ${shown(range.to)}${unit}: ${range.why}.`,
      {
        field,
      },
    );
}

export function shown(value: number): string {
  return String(Number(value.toPrecision(5)));
}
