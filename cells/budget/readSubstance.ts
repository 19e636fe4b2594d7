import { CellError } from "../errors";
import type { CommonVariable } from "../language";
import type { BlockContext } from "../page/context";
import type { Substance as Written } from "../page/schema";
import { parseUnit, sigmaToCanonical, toCanonical, units, type Unit } from "../quantity/unit";
import { elementsOfBody, lookupPhase, parseChemical, parseSpecies, isElement, elementMassFraction, massFactor, speciesOfBody, type Body } from "../species";
import { exact, plus, scaled, type LinearForm } from "./algebra";
import { meanOfClass, sampleOf } from "./samples";
import { nothing, type Known, type Substance } from "./substance";

/** How a budget gets at what it names. */
export interface Access {
  readonly context: BlockContext;
  /** Body by alias or id, with the swap of compilations that is being tried; notes which were used. */
  body(name: string): Body | undefined;
  /** Elements that the budget's expressions need: they decide which samples of a class are complete. */
  readonly needed: readonly string[];
  note(text: string, severity?: "note" | "warning"): void;
}

/**
 * Reads what a budget starts from, adds or compares with.
 *
 * @throws CellError with a sentence where there is no such thing, or where it has no mass fractions
 */
export function readSubstance(written: Written, access: Access): Substance {
  if ("body" in written) return bodySubstance(written.body, access);
  if ("phase" in written) return phaseSubstance(written.phase);
  if ("element" in written) return elementSubstance(written.element);
  if ("composition" in written) return typedSubstance(written.composition);
  if ("class" in written) return meanOfClass(written.data, written.class, access);
  return sampleOf(written.data, "sample" in written ? { sample: written.sample } : { row: written.row }, access);
}

/** @throws CellError where there is no such body, or it is a solar abundance: those are relative to hydrogen */
export function bodySubstance(name: string, access: Access): Substance {
  const body = findBody(name, access);
  if (body.kind === "dex") {
    throw new CellError(
      "dex-body",
      `${body.id} gives abundances relative to hydrogen and no mass fractions, so no mass of it can be balanced. It may serve as the target of a ratio.`,
    );
  }
  return substanceOfBody(body);
}

/** @throws CellError where there is no such body */
export function findBody(name: string, access: Access): Body {
  const body = access.body(name);
  if (body === undefined) {
    throw new CellError("unknown-body", `There is no body "${name}". Give the page an alias of that name, or write the id of a compilation such as CI_PLJ14.`);
  }
  return body;
}

/** A body of whatever kind. Of solar abundances the numbers are kg per kg of hydrogen, which serve for ratios only. */
export function substanceOfBody(body: Body): Substance {
  const listed = elementsOfBody(body);
  return {
    name: body.id,
    elements: [...listed.keys()],
    at: (element) => {
      const found = speciesOfBody(body, element);
      if (found === undefined) return `${body.id} gives no ${element}.`;
      if (body.kind === "phase") return exact(found.value);
      const asListed = body.kind === "dex" ? speciesOfBody(body, found.of.species) : undefined;
      const value = asListed?.value ?? found.of.canonical;
      const sigma = body.kind === "dex" ? asListed?.sigma : found.of.canonicalSigma;
      // The listed value is the input, so that MgO and Mg of one body are one error, here as in formulas.
      const variable: CommonVariable = {
        key: `body:${body.id}:${found.of.species}`,
        label: `${found.of.species} of ${body.id}`,
        value,
        sigma: sigma ?? Number.NaN,
        unit: units["wt%"],
        basis: "mass",
        notes: [found.of.source, found.of.checked, found.of.note].filter((note) => note !== ""),
      };
      return input(variable, found.value / value);
    },
  };
}

function phaseSubstance(phase: string): Substance {
  const body = lookupPhase(phase);
  if (body === undefined) {
    throw new CellError("no-such-phase", `"${phase}" is no phase. Write a name such as forsterite, or a formula such as Mg1.8Fe0.2SiO4.`);
  }
  return { ...substanceOfBody(body), name: phase };
}

function elementSubstance(element: string): Substance {
  if (!isElement(element)) throw new CellError("no-such-element", `"${element}" is not the symbol of an element. Write it as in Si or Fe.`);
  return { name: element, elements: [element], at: (asked) => (asked === element ? exact(1) : nothing) };
}

interface Part {
  readonly element: string;
  readonly form: LinearForm;
  /** kg of oxygen per kg of the element, in an oxide. */
  readonly oxygen: number;
}

/** Rounding that a composition may be off 100 wt% by and still count as complete. */
const COMPLETE = 1e-6;

function typedSubstance(composition: Extract<Written, { composition: unknown }>["composition"]): Substance {
  const parts: Part[] = [];
  let total = 0;
  for (const [key, entry] of Object.entries(composition)) {
    const [species, unit] = readKey(key);
    const value = typeof entry === "number" ? entry : entry.value;
    const sigma = typeof entry === "number" ? undefined : entry.sigma;
    if (!(value >= 0)) throw new CellError("negative-amount", `${key} is ${value}. A composition has no negative parts.`);
    if (parts.some((part) => part.element === species.element))
      throw new CellError("twice", `${species.element} is given twice in the composition. Give each element once, as itself or as its oxide.`);
    const canonical = toCanonical(value, unit);
    total += canonical;
    const formula = species.chemical.formula;
    const factor = massFactor(formula, species.element) ?? Number.NaN;
    const variable: CommonVariable = {
      key: `composition:${key}:${value}`,
      label: `${species.name} of the typed composition`,
      value: canonical,
      sigma: sigma === undefined ? Number.NaN : sigmaToCanonical(sigma, unit),
      unit,
      basis: "mass",
    };
    const oxygen = species.element === "O" ? 0 : elementMassFraction(species.chemical, "O") / elementMassFraction(species.chemical, species.element);
    parts.push({ element: species.element, form: input(variable, factor), oxygen });
  }
  if (parts.length === 0) throw new CellError("empty-composition", "The composition is empty. Give at least one species with its unit, as in SiO2 wt%.");
  if (total > 1 + COMPLETE)
    throw new CellError("over-100", `The composition sums to ${Number((total * 100).toPrecision(6))} wt%, which is more than 100. Look at its units.`);
  const isComplete = Math.abs(total - 1) <= COMPLETE;
  const at = (element: string): Known => {
    const own = parts.find((part) => part.element === element);
    if (own !== undefined) return own.form;
    if (!isComplete)
      return `The typed composition says nothing of ${element}. Give it, if as 0; what is left out counts as 0 only where the rest sums to 100 wt%.`;
    if (element !== "O") return nothing;
    return parts.reduce((sum, part) => plus(sum, scaled(part.form, part.oxygen)), nothing);
  };
  return { name: "the typed composition", elements: parts.map((part) => part.element), at };
}

function readKey(key: string): readonly [species: NonNullable<ReturnType<typeof parseSpecies>>, unit: Unit] {
  const cut = key.trim().search(/\s/u);
  const name = cut < 0 ? key.trim() : key.trim().slice(0, cut);
  const species = parseSpecies(name);
  if (species === undefined || parseChemical(species.chemical.formula) === undefined)
    throw new CellError("no-such-species", `"${name}" in the composition is no element or oxide. Write it as in SiO2 wt% or La µg/g.`);
  if (species.iron === "part" || species.name === "FeS")
    throw new CellError("iron-part-only", `${name} in the composition is a part of the iron. Give all of it, as FeOt, Fe2O3t or Fe_total.`);
  const unit = cut < 0 ? undefined : parseUnit(key.trim().slice(cut));
  if (unit?.dimension !== "mass fraction")
    throw new CellError("composition-unit", `"${key}" needs a unit of mass after the species, as in ${name} wt% or ${name} µg/g.`);
  return [species, unit];
}

/** A number that is `factor` times one input. Exact inputs (σ = 0) stay inputs too: a trace names them. */
export function input(variable: CommonVariable, factor = 1): LinearForm {
  return { value: variable.value * factor, terms: [{ variable, partial: factor }] };
}
