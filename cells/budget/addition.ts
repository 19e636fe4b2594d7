import { minus, oneMinus, over, plus, times } from "./algebra";
import { both, elementsOfBoth, type Deed, type Range, type Stand } from "./state";
import type { Substance } from "./substance";

/** Adds `what`, kg per kg of the start: c′ = (m c + x w) / (m + x). */
export function addition(what: Substance, field: string): Deed {
  return {
    field,
    of: `${what.name} added`,
    unit: "kg/kg",
    range: () => ({ from: 0, to: Infinity, isClosed: false, why: "" }),
    apply: (before, amount) => {
      const mass = plus(before.mass, amount);
      return {
        name: before.name,
        elements: elementsOfBoth(before, what),
        mass,
        parcels: [...before.parcels, { what: what.name, way: "taken in", mass: amount, reported: what, whole: what }],
        at: (element) => {
          if (amount.value === 0 && amount.terms.length === 0) return before.at(element);
          return both(before.at(element), what.at(element), (c, w) => over(plus(times(before.mass, c), times(amount, w)), mass));
        },
      };
    },
  };
}

/** Removes `what`, kg per kg of the start: c′ = (m c − x w) / (m − x). No more than there is of any of its elements. */
export function removal(what: Substance, field: string): Deed {
  return {
    field,
    of: `${what.name} removed`,
    unit: "kg/kg",
    range: (before) => extractable(before, what, before.mass.value, () => true),
    apply: (before, amount) => {
      const mass = minus(before.mass, amount);
      return {
        name: before.name,
        elements: elementsOfBoth(before, what),
        mass,
        parcels: [...before.parcels, { what: what.name, way: "left", mass: amount, reported: what, whole: what }],
        at: (element) => {
          if (amount.value === 0 && amount.terms.length === 0) return before.at(element);
          return both(before.at(element), what.at(element), (c, w) => over(minus(times(before.mass, c), times(amount, w)), mass));
        },
      };
    },
  };
}

/**
 * The most of `what` that can be taken out of a stand, as mass: all of the element that runs out first.
 *
 * @param mass mass that is there, in the amount's unit
 * @param counts elements that are taken out in the proportions of `what`
 */
export function extractable(before: Stand, what: Substance, mass: number, counts: (element: string) => boolean): Range {
  let to = mass;
  let isClosed = false;
  let why = `there is no more than ${short(mass)} of everything together`;
  for (const element of what.elements) {
    if (!counts(element)) continue;
    const [has, takes] = [before.at(element), what.at(element)];
    if (typeof has === "string" || typeof takes === "string" || !(takes.value > 0)) continue;
    const limit = (mass * Math.max(0, has.value)) / takes.value;
    if (limit >= to) continue;
    to = limit;
    isClosed = true;
    why = `${element} is used up then`;
  }
  return { from: 0, to, isClosed, why };
}

/** Mixes `what` in: c′ = (1 − x) c + x w, with x the mass fraction of `what` in the mixture (Langmuir et al. 1978: ratios lie on hyperbolas). */
export function mixing(what: Substance, field: string): Deed {
  return {
    field,
    of: `${what.name} in the mixture`,
    unit: "1",
    range: () => ({ from: 0, to: 1, isClosed: true, why: "it is a fraction of the mixture" }),
    apply: (before, amount) => {
      const rest = oneMinus(amount);
      const mass = over(before.mass, rest);
      return {
        name: before.name,
        elements: elementsOfBoth(before, what),
        mass,
        parcels: [...before.parcels, { what: what.name, way: "taken in", mass: times(mass, amount), reported: what, whole: what }],
        at: (element) => {
          if (amount.terms.length === 0 && amount.value === 0) return before.at(element);
          if (amount.terms.length === 0 && amount.value === 1) return what.at(element);
          return both(before.at(element), what.at(element), (c, w) => plus(times(rest, c), times(amount, w)));
        },
      };
    },
  };
}

function short(value: number): string {
  return `${Number(value.toPrecision(4))} kg per kg of the start`;
}
