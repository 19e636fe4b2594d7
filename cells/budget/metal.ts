import { exact, oneMinus, over, plus, scaled, times, type LinearForm } from "./algebra";
import { both, elementsOfBoth, type Deed } from "./state";
import { nothing, type Known, type Substance } from "./substance";

/**
 * Elements that metal is taken to hold none of: the lithophile elements of Goldschmidt's classification without those whose
 * place in metal is argued over (K, V, Cr, Mn, Nb, Ta, the halogens, C, H, N, O, S, P). Common practice, no source.
 */
const lithophile: ReadonlySet<string> = new Set([
  ...["Li", "Be", "Na", "Mg", "Al", "Ca", "Sc", "Ti", "Rb", "Sr", "Y", "Zr", "Cs", "Ba", "Hf", "Th", "U"],
  ...["La", "Ce", "Pr", "Nd", "Sm", "Eu", "Gd", "Tb", "Dy", "Ho", "Er", "Tm", "Yb", "Lu"],
]);

/**
 * Shares species with metal. The stand before is the silicate as it is now, the one after it the whole it came from, per kg:
 * c′ = (1 − f) c + f m, where the metal m holds `amount` wt% of each shared species and the rest in the proportions of `rest`.
 * Masses stay per kg, now of the whole.
 *
 * @param fraction f, the metal's share of the whole
 * @param rest what the metal is beside the shared species; unknown where left out
 */
export function sharing(species: readonly string[], fraction: LinearForm, rest: Substance | undefined, field: string): Deed {
  return {
    field,
    of: `${listed(species)} in the metal`,
    unit: "wt%",
    range: () => ({ from: 0, to: 100 / species.length, isClosed: true, why: "there is no more room in the metal" }),
    apply: (before, amount) => {
      const share = scaled(amount, 0.01);
      const metal = metalOf(species, share, rest);
      const silicate = oneMinus(fraction);
      return {
        name: before.name,
        elements: elementsOfBoth(before, metal),
        mass: before.mass,
        parcels: [
          ...before.parcels,
          { what: "metal", way: "left", mass: times(before.mass, fraction), reported: metal, whole: metal, metal: { species, share } },
        ],
        at: (element) => both(before.at(element), metal.at(element), (c, m) => plus(times(silicate, c), times(fraction, m))),
      };
    },
  };
}

function metalOf(species: readonly string[], share: LinearForm, rest: Substance | undefined): Substance {
  // How much of the metal is the rest, by how much of the given body is not the shared species.
  const scale = rest === undefined ? undefined : restScale(species, share, rest);
  return {
    name: "the metal",
    elements: [...new Set([...species, ...(rest?.elements ?? [])])],
    at: (element): Known => {
      if (species.includes(element)) return share;
      const given = rest?.at(element);
      if (given !== undefined && typeof given !== "string") return typeof scale === "string" ? scale : scale === undefined ? given : times(given, scale);
      if (lithophile.has(element)) return nothing;
      if (rest === undefined) return `The metal may hold ${element}, and nothing says how much. Say what the rest of the metal is.`;
      return `The metal may hold ${element}, and ${rest.name}, which stands for the rest of it, gives none.`;
    },
  };
}

function restScale(species: readonly string[], share: LinearForm, rest: Substance): LinearForm {
  let shared: LinearForm = exact(0);
  for (const element of species) {
    const held = rest.at(element);
    if (typeof held !== "string") shared = plus(shared, held);
  }
  return over(oneMinus(scaled(share, species.length)), oneMinus(shared));
}

function listed(species: readonly string[]): string {
  return species.length < 2 ? (species[0] ?? "") : `${species.slice(0, -1).join(", ")} and ${species[species.length - 1] ?? ""}, each,`;
}
