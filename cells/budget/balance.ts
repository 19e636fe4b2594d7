import type { BudgetPart, BudgetResult } from "../page/results";
import { over, plus, times, type LinearForm } from "./algebra";
import type { Parcel, Stand } from "./state";
import { isKnown, type Known, type Substance } from "./substance";

/**
 * What left the balance, as one thing: its mass in kg per kg of the start (of the whole, where metal is shared) and its
 * composition in kg/kg. Where nothing left, what was taken in. Elements that are not known of every part are left out.
 */
export function leftOf(end: Stand): BudgetResult["left"] {
  const left = end.parcels.filter(({ way }) => way === "left");
  const parcels = left.length > 0 ? left : end.parcels;
  if (parcels.length === 0) return undefined;
  const mass = parcels.reduce((sum, parcel) => sum + parcel.mass.value, 0);
  if (!Number.isFinite(mass)) return undefined;
  const names = [...new Set(parcels.map(({ what }) => what))].join(" and ");
  const what = left.length > 0 ? names : `${names}, taken in`;
  const composition: Record<string, number> = {};
  const [only] = parcels;
  const elements = new Set(parcels.flatMap(({ reported }) => reported.elements));
  for (const element of elements) {
    // Several melts make one melt by what was collected of each; a single one is given as its model says.
    const value = parcels.length === 1 && only !== undefined ? valueOf(only.reported, element) : mixedValue(parcels, element, mass);
    if (Number.isFinite(value)) composition[element] = value;
  }
  return { what, mass, composition };
}

/** Mass of what left, or one element of it, as it depends on the budget's inputs: the numbers of {@link leftOf} with their terms. */
export function leftForm(end: Stand, of: string): Known | undefined {
  const left = end.parcels.filter(({ way }) => way === "left");
  const parcels = left.length > 0 ? left : end.parcels;
  const [only] = parcels;
  if (only === undefined) return undefined;
  const mass = parcels.slice(1).reduce((sum, parcel) => plus(sum, parcel.mass), only.mass);
  if (of === "mass") return mass;
  if (parcels.length === 1) return only.reported.at(of);
  let total: LinearForm | undefined;
  for (const parcel of parcels) {
    const known = parcel.whole.at(of);
    if (!isKnown(known)) return known;
    const part = times(parcel.mass, known);
    total = total === undefined ? part : plus(total, part);
  }
  return total === undefined ? undefined : over(total, mass);
}

function valueOf(of: Substance, element: string): number {
  const known = of.at(element);
  return isKnown(known) ? known.value : Number.NaN;
}

function mixedValue(parcels: readonly Parcel[], element: string, mass: number): number {
  return parcels.reduce((sum, parcel) => sum + parcel.mass.value * valueOf(parcel.whole, element), 0) / mass;
}

/** Mass at start and end, and what is missing between them and what was taken in or left: 0 but for rounding. */
export function closureOf(end: Stand): BudgetResult["closure"] {
  const total = (way: Parcel["way"]): number => end.parcels.reduce((sum, parcel) => (parcel.way === way ? sum + parcel.mass.value : sum), 0);
  const kept = keptMass(end);
  const error = 1 + total("taken in") - total("left") - kept;
  return Number.isFinite(error) ? { start: 1, end: kept, error } : undefined;
}

/** Mass that is not metal and did not leave. */
function keptMass(end: Stand): number {
  return end.mass.value - metalMass(end);
}

function metalMass(end: Stand): number {
  return end.parcels.reduce((sum, parcel) => (parcel.metal === undefined ? sum : sum + parcel.mass.value), 0);
}

/**
 * How the mass, and each element that is asked for, is divided between what is kept and what left. Undefined where that cannot
 * be said: after metal was shared and the whole then changed, what left is no part of the one or the other.
 */
export function balanceOf(end: Stand, elements: readonly string[]): readonly BudgetPart[] | undefined {
  const place = end.parcels.findIndex(({ metal }) => metal !== undefined);
  if (end.parcels.length === 0 || (place >= 0 && place < end.parcels.length - 1)) return undefined;
  const metal = end.parcels[place];
  const left = end.parcels.filter(({ way }) => way === "left");
  const parts: BudgetPart[] = [];
  const put = (of: string, kept: number, gone: number, moved: number | undefined): void => {
    const all = kept + gone;
    if (!(all > 0) || !Number.isFinite(all)) return;
    parts.push({ of, kept: kept / all, left: gone / all, ...(moved === undefined ? {} : { moved: moved / all }) });
  };
  const shared = metal?.metal;
  const movedMass = shared === undefined || metal === undefined ? undefined : metal.mass.value * shared.share.value * shared.species.length;
  put(
    "mass",
    keptMass(end),
    left.reduce((sum, parcel) => sum + parcel.mass.value, 0),
    movedMass,
  );
  for (const element of elements) {
    const ownMetal = metal === undefined ? 0 : metal.mass.value * valueOf(metal.whole, element);
    const kept = end.mass.value * valueOf(end, element) - ownMetal;
    const gone = left.reduce((sum, parcel) => sum + (parcel.mass.value === 0 ? 0 : parcel.mass.value * valueOf(parcel.whole, element)), 0);
    put(element, kept, gone, shared?.species.includes(element) === true ? ownMetal : undefined);
  }
  return parts;
}
