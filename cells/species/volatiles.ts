import type { QuantityColumn } from "../table/table";
import { parseSpecies } from "./forms";

const volatileOxides: ReadonlySet<string> = new Set(["H2O", "CO2", "SO2", "SO3"]);
const volatileElements: ReadonlySet<string> = new Set(["H", "C", "S"]);

/** Whether a species goes with the volatiles of a rock: water, carbon and sulphur. Sulphur in troilite counts with its iron. */
export function isVolatile(species: string): boolean {
  const parsed = parseSpecies(species);
  return parsed !== undefined && parsed.element !== "Fe" && (volatileOxides.has(parsed.name) || volatileElements.has(parsed.element));
}

/**
 * What a volatile-free renormalisation does to a column: `scaled` with its row, `as measured` where it is per mass of rock too
 * but a volatile, loss on ignition, or of no species that anybody named, `untouched` where it is no amount per mass (ratios,
 * temperatures, amount fractions).
 */
export function underRenormalisation(column: QuantityColumn): "scaled" | "as measured" | "untouched" {
  const { dimension } = column.unit;
  if (dimension !== "mass fraction" && dimension !== "amount per mass") return "untouched";
  return column.species === undefined || column.name === "LOI" || isVolatile(column.species) ? "as measured" : "scaled";
}
