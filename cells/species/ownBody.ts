import { z } from "zod";
import { parseUnit, sigmaToCanonical, toCanonical } from "../quantity/unit";
import type { Body, BodyValue } from "./body";
import { parseSpecies } from "./forms";

/**
 * A group's own reference composition, as a page carries it: whole, so that the page says for itself what its numbers lean on.
 * One id always means one composition; a group that corrects a body makes another version of it under an id of its own.
 */
export const ownValueSchema = z.strictObject({
  /** Element or oxide; of iron the total, as in the built-in bodies. */
  species: z.string().min(1).max(40),
  unit: z.string().min(1).max(40),
  value: z.number(),
  /** 1σ in `unit`; left out where it is unknown. 0 says exact. */
  sigma: z.number().optional(),
});

/** What the id of an own body begins with; no built-in body's does. */
const OWN = "OWN_";
/** Most own bodies that one page carries. */
export const MOST_OWN_BODIES = 40;

export const ownBodyIdSchema = z
  .string()
  .max(40)
  .regex(/^OWN_[A-Za-z0-9_]+$/u, "the id of an own body is OWN_ with letters, digits and _ after it");

/** The short name that people give, from which the ids of a body's versions are made. */
export const ownBodyCodeSchema = z
  .string()
  .max(28, "A short name has at most 28 characters")
  .regex(/^[A-Za-z][A-Za-z0-9_]*$/u, "A short name has letters, digits and _ only, and begins with a letter");

export const ownBodySchema = z
  .strictObject({
    /** What it is: `depleted mantle`. One that is named as the built-in bodies name a kind, `CI chondrite`, is a compilation of that kind. */
    name: z.string().max(120, "What the body is has at most 120 characters").regex(/\S/u, "Say what the body is"),
    description: z.string().max(2000, "A description has at most 2,000 characters").optional(),
    /** A citation or DOI, or the words "from memory". */
    source: z
      .string()
      .max(500, "A source has at most 500 characters")
      .regex(/[\p{L}\p{N}]{2}/u, 'Give the source: a citation or a DOI, or the words "from memory"'),
    fromMemory: z.boolean(),
    values: z.array(ownValueSchema).min(1, "A body has at least one value").max(200, "A body has at most 200 values"),
  })
  .superRefine((own, { addIssue }) => {
    if (saysFromMemory(own.source) && !own.fromMemory)
      addIssue({ code: "custom", path: ["fromMemory"], message: "a body whose source is from memory has fromMemory true" });
    for (const { row, text } of ownBodyFaults(own.values)) addIssue({ code: "custom", path: ["values", row - 1], message: text.replace(/\.$/u, "") });
  });

export const ownBodiesSchema = z
  .record(ownBodyIdSchema, ownBodySchema)
  .refine((bodies) => Object.keys(bodies).length <= MOST_OWN_BODIES, `a page has at most ${MOST_OWN_BODIES} own bodies`);

export type OwnValue = z.infer<typeof ownValueSchema>;
export type OwnBody = z.infer<typeof ownBodySchema>;

/** Whether an id is that of a group's own body. */
export function isOwnBodyId(id: string): boolean {
  return id.startsWith(OWN);
}

/** The id of one version of a body: `OWN_Mantle_2`. */
export function ownBodyId(code: string, version: number): string {
  return `${OWN}${code}_${version}`;
}

/** Whether a source says that there is none but somebody's memory. */
export function saysFromMemory(source: string): boolean {
  return /^\s*from memory\b/iu.test(source);
}

/** What is wrong with one value, in a sentence that names its row and species. */
export interface OwnBodyFault {
  /** 1-based. */
  readonly row: number;
  readonly text: string;
}

/**
 * Everything that is wrong with the values of a body: species and units that are none, an element given twice, numbers that no
 * composition can have.
 *
 * @param rowOf the row that the sentences name for a value, by its place among the values; its place counted from 1, where left out
 */
export function ownBodyFaults(values: readonly OwnValue[], rowOf: (index: number) => number = (index) => index + 1): OwnBodyFault[] {
  const faults: OwnBodyFault[] = [];
  const given = new Map<string, { readonly row: number; readonly species: string }>();
  values.forEach((each, index) => {
    const row = rowOf(index);
    const say = (text: string): void => void faults.push({ row, text: `Row ${row}, ${each.species}: ${text}` });
    const species = parseSpecies(each.species);
    if (species === undefined) say("this is no element or oxide. Write it as in Mg or MgO.");
    else {
      const before = given.get(species.element);
      if (before === undefined) given.set(species.element, { row, species: each.species });
      if (species.name === "Fe2O3") say("this does not say whether it is all the iron. Write Fe2O3t if it is.");
      else if (species.iron === "part") say("this is a part of the iron. A body gives all of it, as Fe_total, FeOt or Fe2O3t.");
      else if (before !== undefined)
        say(
          `${species.element} is given in row ${before.row} already, as ${before.species}. Give each element once${species.element === "Fe" ? ", iron as its total" : ""}.`,
        );
    }
    const unit = parseUnit(each.unit);
    if (unit?.dimension !== "mass fraction") say(`"${each.unit}" is no unit of mass per mass. Write one such as wt%, mg/g or µg/g.`);
    if (!Number.isFinite(each.value)) say("the value is no finite number.");
    else if (each.value < 0) say(`the value is ${each.value}, and nothing holds less than none of it.`);
    else if (unit?.dimension === "mass fraction" && toCanonical(each.value, unit) > 1)
      say(`${each.value} ${unit.symbol} is more than the whole. Look at the unit.`);
    if (each.sigma !== undefined && !Number.isFinite(each.sigma)) say("the σ is no finite number. Leave it out where it is unknown.");
    else if (each.sigma !== undefined && each.sigma < 0) say(`the σ is ${each.sigma}, and a σ is not negative. Leave it out where it is unknown.`);
  });
  return faults;
}

/**
 * An own body as the engine calculates with it; undefined where something in it is wrong. Documents are checked when they are
 * read, so that only what came past that check is left out here.
 */
export function bodyOfOwn(id: string, own: OwnBody): Body | undefined {
  if (!ownBodyIdSchema.safeParse(id).success || ownBodyFaults(own.values).length > 0) return undefined;
  const checked = own.fromMemory ? "from memory" : "by the group that entered it, from the source it names";
  const values = own.values.map(({ species, unit: written, value, sigma }): BodyValue => {
    const unit = parseUnit(written);
    const read = parseSpecies(species);
    if (unit === undefined || read === undefined) throw new Error("expected values without a fault");
    return {
      species: read.name,
      value,
      unit: unit.symbol,
      sigma: sigma ?? null,
      canonical: toCanonical(value, unit),
      canonicalSigma: sigma === undefined ? null : sigmaToCanonical(sigma, unit),
      source: own.source,
      checked,
      note: "",
    };
  });
  return { id, what: own.name, kind: "composition", values, fromMemory: own.fromMemory };
}
