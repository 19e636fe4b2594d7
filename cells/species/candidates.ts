import type { QuantityColumn, Table } from "../table/table";
import { massFactor, parseSpecies, type Species } from "./forms";
import type { Candidate, Term } from "./resolution";
import { shortNumber } from "./speciesOfBody";

/** A quantity column with its place in the table and what it measures. */
export interface Measured {
  readonly column: QuantityColumn;
  readonly index: number;
  readonly species: Species | undefined;
}

/** The quantity columns of a table, with their species read. */
export function measuredColumns(table: Table): readonly Measured[] {
  return table.columns.flatMap((column, index) =>
    column.kind === "quantity" ? [{ column, index, species: column.species === undefined ? undefined : parseSpecies(column.species) }] : [],
  );
}

/** Mass fractions, and moles per mass, which differ from them by a constant. */
export function convertsByMass(column: QuantityColumn): boolean {
  return column.unit.dimension === "mass fraction" || column.unit.dimension === "amount per mass";
}

/** One column taken as it stands. */
export function single(of: Measured, name: string): Candidate {
  return {
    terms: [{ column: of.column, index: of.index, factor: 1 }],
    asItStands: true,
    sentence: of.column.name === name ? name : `${name} = ${of.column.name}`,
  };
}

/** One column converted to `to`, by mass. */
export function converted(of: Measured, to: Species): Candidate {
  const term = termFor(of, to);
  const standing = term.factor === 1;
  return {
    terms: [term],
    asItStands: standing,
    sentence: standing ? `${to.name} = ${of.column.name}` : `${to.name} = ${of.column.name} × ${shortNumber(term.factor)}`,
  };
}

/** A column as a term of `to`: its factor by mass, and by moles where it counts moles. */
export function termFor(of: Measured, to: Species): Term {
  const from = of.species ?? to;
  let factor = from.name === to.name ? 1 : (massFactor(from.chemical.formula, to.chemical.formula) ?? Number.NaN);
  if (of.column.unit.dimension === "amount per mass") factor *= from.chemical.weight / 1000;
  return { column: of.column, index: of.index, factor };
}
