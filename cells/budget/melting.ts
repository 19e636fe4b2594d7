import { CellError } from "../errors";
import { exp } from "../numeric";
import { extractable } from "./addition";
import { exact, minus, one, oneMinus, over, plus, raised, times, type LinearForm } from "./algebra";
import { both, elementsOfBoth, type Deed, type Range } from "./state";
import { isKnown, type Known, type Substance } from "./substance";

export type MeltModel = "batch" | "fractional" | "aggregated";

/** How one element parts between melt and residue. */
export interface Parting {
  /** Bulk coefficient of the solid at the start. */
  readonly D: LinearForm;
  /** Coefficient of the phases as they melt; D where left out (modal melting). */
  readonly P?: LinearForm;
}

/** Concentrations over that of the source, C/C₀. */
export interface Parted {
  readonly melt: LinearForm;
  /** Of all melt together; `melt` itself where that is what the model collects. */
  readonly collected: LinearForm;
  readonly residue: LinearForm;
}

/**
 * Melt and residue of one element (Shaw 1970, Geochim. Cosmochim. Acta 34, 237; eqs. 9–15, numbered from memory):
 * batch C_L/C₀ = 1/(D + F(1 − P)); fractional C_L/C₀ = (1/D)(1 − PF/D)^(1/P − 1), aggregated (1/F)[1 − (1 − PF/D)^(1/P)],
 * residue of both (1 − PF/D)^(1/P)/(1 − F).
 *
 * @param F melt fraction, 0 ≤ F < 1
 */
export function part(model: MeltModel, { D, P }: Parting, F: LinearForm): Parted {
  const solid = oneMinus(F);
  if (model === "batch") {
    const melt = over(one, plus(D, times(F, oneMinus(P ?? D))));
    // (D − PF)/(1 − F), which is D itself in modal melting.
    const coefficient = P === undefined ? D : over(minus(D, times(P, F)), solid);
    return { melt, collected: melt, residue: times(coefficient, melt) };
  }
  const held = heldBack({ D, ...(P === undefined ? {} : { P }) }, F);
  const residue = over(held, solid);
  const collected = F.value === 0 ? over(one, D) : over(oneMinus(held), F);
  if (model === "aggregated") return { melt: collected, collected, residue };
  return { melt: D.value === 0 ? exact(0) : over(times(residue, solid), times(D, leftOver({ D, ...(P === undefined ? {} : { P }) }, F))), collected, residue };
}

/** 1 − PF/D, the part of the phases that hold the element. */
function leftOver({ D, P }: Parting, F: LinearForm): LinearForm {
  return P === undefined ? oneMinus(F) : oneMinus(over(times(P, F), D));
}

/** (1 − PF/D)^(1/P), what the residue still holds of the element. */
function heldBack(parting: Parting, F: LinearForm): LinearForm {
  const { D, P } = parting;
  if (F.value === 0 && F.terms.length === 0) return one;
  if (P !== undefined && P.value === 0) {
    const value = exp(-F.value / D.value);
    return plus(exact(value), times(exact(-value), minus(over(F, D), exact(F.value / D.value))));
  }
  if (P === undefined && D.value === 0) return exact(0);
  return raised(leftOver(parting, F), over(one, P ?? D));
}

export interface Melting {
  readonly model: MeltModel;
  /** By element. */
  readonly partings: ReadonlyMap<string, Parting>;
  /** Composition of the melt, for major elements. */
  readonly melt?: Substance;
}

/** Extracts a melt: the stand after it is the residue, what left is the melt. `amount` is the melt fraction of what is there. */
export function extraction({ model, partings, melt }: Melting, field: string): Deed {
  return {
    field,
    of: "melt extracted",
    unit: "1",
    range: (before) => {
      const byMelt: Range = { from: 0, to: 1, isClosed: false, why: "a residue must be left" };
      const range = melt === undefined ? byMelt : { ...extractable(before, melt, 1, (element) => !partings.has(element)) };
      let [to, why, isClosed] = [range.to, range.to < 1 ? range.why : byMelt.why, range.to < 1 && range.isClosed];
      for (const [element, { D, P }] of partings) {
        const limit = P === undefined || !(P.value > 0) ? Infinity : D.value / P.value;
        if (limit > to) continue;
        [to, isClosed] = [limit, false];
        why = `1 − PF/D for ${element} would not stay above 0: the phases that hold it are used up (D ${D.value}, P ${P?.value ?? D.value})`;
      }
      return { from: 0, to, isClosed, why };
    },
    apply: (before, F) => {
      const parted = new Map<string, Parted>();
      const of = (element: string): Parted | undefined => {
        const parting = partings.get(element);
        if (parting === undefined) return undefined;
        const known = parted.get(element) ?? part(model, parting, F);
        parted.set(element, known);
        return known;
      };
      const solid = oneMinus(F);
      const liquid = (element: string, which: "melt" | "collected"): Known => {
        const ratio = of(element)?.[which];
        const source = before.at(element);
        if (ratio !== undefined) return isKnown(source) ? times(source, ratio) : source;
        return melt?.at(element) ?? lacking(element);
      };
      const reported: Substance = { name: "the melt", elements: meltElements(partings, melt), at: (element) => liquid(element, "melt") };
      return {
        name: before.name,
        elements: melt === undefined ? before.elements : elementsOfBoth(before, melt),
        mass: times(before.mass, solid),
        parcels: [
          ...before.parcels,
          {
            what: model === "fractional" ? "the last melt" : "melt",
            way: "left",
            mass: times(before.mass, F),
            reported,
            whole: { ...reported, at: (element) => liquid(element, "collected") },
          },
        ],
        at: (element) => {
          const ratio = of(element)?.residue;
          if (ratio !== undefined) {
            const source = before.at(element);
            return isKnown(source) ? times(source, ratio) : source;
          }
          if (F.value === 0 && F.terms.length === 0) return before.at(element);
          return both(before.at(element), melt?.at(element) ?? lacking(element), (c, l) => over(minus(c, times(F, l)), solid));
        },
      };
    },
  };
}

function meltElements(partings: ReadonlyMap<string, Parting>, melt: Substance | undefined): readonly string[] {
  return [...new Set([...partings.keys(), ...(melt?.elements ?? [])])];
}

function lacking(element: string): string {
  return `The melt takes ${element} along, and nothing says how much. Give its coefficient, or the melt's composition if it is a major element.`;
}

/** @throws CellError where a coefficient does not belong to an element that has one in the solid */
export function requirePaired(partings: ReadonlyMap<string, Parting>, meltCoefficients: Iterable<string>, field: string): void {
  for (const element of meltCoefficients)
    if (!partings.has(element))
      throw new CellError("coefficient-alone", `${element} has a coefficient for the melting phases and none for the solid. Give it among coefficients too.`, {
        field,
      });
}
