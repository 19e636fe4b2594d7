import { pow } from "../numeric";
import type { Body, BodySpecies, BodyValue } from "./body";
import { atomicWeight } from "./chemical";
import { massFactor, parseSpecies, type Species } from "./forms";

const LN10 = 2.302585092994046;

/**
 * One species of a body, by conversion where the body lists another species of the element. Where both are listed, the one
 * with a σ. Iron listed by a body is the total, FeO too, so `Fe`, `FeO`, `FeOt`, `Fe_total` and `Fe2O3t` can be had of it and
 * the parts `Fe_metal`, `FeS` and `Fe2O3` cannot.
 *
 * @returns undefined where the body does not hold the species; a phase holds 0 of an element that is not in its formula
 */
export function speciesOfBody(body: Body, name: string): BodySpecies | undefined {
  const species = parseSpecies(name);
  if (species === undefined) return undefined;
  if (species.iron !== undefined && body.kind !== "phase" && !totalOfBody.has(species.name)) return undefined;
  let chosen: BodySpecies | undefined;
  let exact = false;
  for (const listed of body.values) {
    const made = convert(body, listed, species);
    if (made === undefined) continue;
    const asItStands = listed.species === species.name;
    const better =
      chosen === undefined || (made.sigma !== null && chosen.sigma === null) || (asItStands && !exact && (made.sigma !== null) === (chosen.sigma !== null));
    if (better) {
      chosen = made;
      exact = asItStands;
    }
  }
  if (chosen !== undefined || body.kind !== "phase") return chosen;
  const first = body.values[0];
  return first === undefined
    ? undefined
    : { body, species: species.name, value: 0, sigma: 0, of: first, sentence: `${body.formula ?? body.id} holds no ${species.element}` };
}

const totalOfBody: ReadonlySet<string> = new Set(["Fe", "FeO", "FeOt", "Fe_total", "Fe2O3t"]);

function convert(body: Body, listed: BodyValue, species: Species): BodySpecies | undefined {
  const of = parseSpecies(listed.species);
  if (of === undefined || of.element !== species.element) return undefined;
  const factor = of.name === species.name ? 1 : massFactor(of.chemical.formula, species.chemical.formula);
  if (factor === undefined) return undefined;
  if (body.kind === "dex") return fromDex(body, listed, species, factor);
  const sentence = factor === 1 ? "" : `${species.name} = ${listed.species} × ${shortNumber(factor)}`;
  return {
    body,
    species: species.name,
    value: listed.canonical * factor,
    sigma: listed.canonicalSigma === null ? null : listed.canonicalSigma * factor,
    of: listed,
    sentence,
  };
}

/** A(El) = log10(N/N_H) + 12 turned into kg per kg of hydrogen; dσ = value · ln 10 · σ(A). */
function fromDex(body: Body, listed: BodyValue, species: Species, factor: number): BodySpecies | undefined {
  const weight = atomicWeight(listed.species);
  const hydrogen = atomicWeight("H");
  if (weight === undefined || hydrogen === undefined) return undefined;
  const value = ((pow(10, listed.canonical - 12) * weight) / hydrogen) * factor;
  const sigma = listed.canonicalSigma === null ? null : value * LN10 * listed.canonicalSigma;
  return { body, species: species.name, value, sigma, of: listed, sentence: `${species.name} from A(${listed.species}) = ${listed.value} dex` };
}

/**
 * Every element a body holds, each once, oxygen only where it is listed or the body is a phase. For mass balances.
 */
export function elementsOfBody(body: Body): ReadonlyMap<string, BodySpecies> {
  const elements = new Map<string, BodySpecies>();
  for (const listed of body.values) {
    const element = parseSpecies(listed.species)?.element;
    if (element === undefined || elements.has(element)) continue;
    const made = speciesOfBody(body, element);
    if (made !== undefined) elements.set(element, made);
  }
  return elements;
}

/** Six significant digits, for sentences. */
export function shortNumber(value: number): string {
  return String(Number(value.toPrecision(6)));
}
