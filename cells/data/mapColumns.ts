import type { Basis, Column, UncertaintyKind } from "../page/schema";
import { parseUnit, units, type Unit } from "../quantity/unit";
import { parseSpecies } from "../species";
import { readHeader } from "../table";
import type { Grid } from "./grid";
import { counted, listed, type Problems } from "./problems";

/** A column of the block, tied to a column of its grid. */
export interface MappedColumn {
  readonly name: string;
  readonly header?: string;
  /** Place in the grid, from 0. */
  readonly at: number;
  readonly column: Column;
}

export interface MappedQuantity extends MappedColumn {
  readonly species?: string;
  readonly unit: Unit;
  readonly basis?: Basis;
  /** Kind of uncertainties inside its cells; undefined where nobody said. */
  readonly inCells?: UncertaintyKind;
  readonly sigma?: MappedSigma;
}

export interface MappedSigma extends MappedColumn {
  readonly kind: UncertaintyKind;
  /** Unit of absolute uncertainties: its own, else the quantity's. */
  readonly unit: Unit;
}

export interface Mapping {
  /** In the order of the block's columns, those of uncertainties left out. */
  readonly columns: readonly (MappedColumn | MappedQuantity)[];
  /** Every column that could be tied to the grid, those of uncertainties and those in error included: what amendments may name. */
  readonly tied: readonly MappedColumn[];
}

export function isQuantity(mapped: MappedColumn | MappedQuantity): mapped is MappedQuantity {
  return mapped.column.role === "quantity";
}

/**
 * Ties the block's columns to those of its grid. Whatever does not fit is said and left out, and the rest stands: a column
 * that cannot be found is never replaced by a neighbour.
 */
export function mapColumns(grid: Grid, columns: readonly Column[], problems: Problems): Mapping {
  const tied: MappedColumn[] = [];
  for (const [index, column] of columns.entries()) {
    const at = grid.typed ? typedPlace(column, index, problems) : placeInSource(grid, column, index, problems);
    if (at === undefined) continue;
    const header = grid.typed ? column.header : grid.headers[at];
    tied.push({ name: (column.name ?? column.header ?? header ?? "").normalize("NFC"), ...(header === undefined ? {} : { header }), at, column });
  }
  sayUnread(grid, tied, problems);
  const named = withoutTwins(tied, grid.typed, problems);
  const quantities = named.filter((mapped) => mapped.column.role === "quantity");
  const sigmas = attachUncertainties(
    tied.filter((mapped) => mapped.column.role === "uncertainty"),
    quantities,
    problems,
  );
  const made = named.flatMap((mapped): (MappedColumn | MappedQuantity)[] => {
    if (mapped.column.role === "uncertainty") return [];
    if (mapped.column.role !== "quantity") return [mapped];
    const quantity = readMeaning(grid, mapped, problems);
    if (quantity === undefined) return [];
    const sigma = sigmas.get(mapped);
    const read = sigma === undefined ? undefined : readSigma(sigma, quantity, problems);
    return [read === undefined ? quantity : { ...quantity, sigma: read }];
  });
  return { columns: oneOfEach(made, problems), tied };
}

function typedPlace(column: Column, index: number, problems: Problems): number | undefined {
  if ((column.name ?? column.header) !== undefined) return index;
  problems.error("column-without-name", `Column ${index + 1} of the typed table has no name, so no cell can stand in it. Give it one.`, {
    field: `columns[${index}]`,
  });
  return undefined;
}

/** Headers are compared as the reader keeps them: trimmed, runs of blanks as one. */
function tidy(header: string): string {
  return header.trim().replace(/\s+/gu, " ").normalize("NFC");
}

function placeInSource(grid: Grid, column: Column, index: number, problems: Problems): number | undefined {
  const field = `columns[${index}]`;
  const header = column.header ?? (column.position === undefined ? column.name : undefined);
  const { position } = column;
  if (header === undefined && position === undefined) {
    problems.error("column-without-header", `Column ${index + 1} names neither a header nor a place in the source, so it cannot be found. Give it a header.`, {
      field,
    });
    return undefined;
  }
  const places = header === undefined ? [] : grid.headers.flatMap((other, at) => (tidy(other) === tidy(header) ? [at] : []));
  if (position !== undefined) {
    const there = grid.headers[position - 1];
    if (there === undefined) {
      problems.error(
        "header-position",
        `Column ${position} is asked for${header === undefined ? "" : ` as "${header}"`}, and the source has ${counted(grid.headers.length, "column")}. Correct the place.`,
        { field, ...(header === undefined ? {} : { column: header }) },
      );
      return undefined;
    }
    if (header === undefined || tidy(there) === tidy(header)) return position - 1;
    const elsewhere = places.length === 0 ? "is nowhere in the source" : `stands in column ${listed(places.map((at) => String(at + 1)))}`;
    problems.error("header-position", `Column ${position} of the source is "${there}", not "${header}", which ${elsewhere}. Correct the header or the place.`, {
      field,
      column: header,
    });
    return undefined;
  }
  if (places.length === 1) return places[0];
  problems.error(
    places.length === 0 ? "header-not-found" : "header-ambiguous",
    places.length === 0
      ? `The source has no column with the header "${header ?? ""}". It has ${listed(grid.headers, 12)}. Correct the header.`
      : `The source has the header "${header ?? ""}" ${places.length} times, in columns ${listed(places.map((at) => String(at + 1)))}. Say by its position which one is meant.`,
    { field, column: header ?? "" },
  );
  return undefined;
}

function sayUnread(grid: Grid, tied: readonly MappedColumn[], problems: Problems): void {
  if (grid.typed) return;
  const read = new Set(tied.map((mapped) => mapped.at));
  const unread = grid.headers.filter((_, at) => !read.has(at));
  if (unread.length > 0)
    problems.note(
      "columns-not-read",
      `${counted(unread.length, "column")} of the source ${unread.length === 1 ? "is" : "are"} given no role and not read: ${listed(unread)}.`,
      { field: "columns" },
    );
}

/** Columns whose name no other has: a name that means two things would make every formula that uses it a guess. */
function withoutTwins(tied: readonly MappedColumn[], typed: boolean, problems: Problems): readonly MappedColumn[] {
  const byName = new Map<string, MappedColumn[]>();
  for (const mapped of tied) {
    if (mapped.column.role === "uncertainty" && !typed) continue;
    byName.set(mapped.name, [...(byName.get(mapped.name) ?? []), mapped]);
  }
  for (const [name, twins] of byName)
    if (twins.length > 1)
      problems.error(
        "column-name-twice",
        `${twins.length} columns have the name "${name}" (${listed(twins.map((twin) => `"${twin.header ?? twin.name}" in column ${twin.at + 1}`))}), so the name means none of them. Rename all but one.`,
        { column: name, field: "columns" },
      );
  return tied.filter((mapped) => (byName.get(mapped.name)?.length ?? 0) <= 1);
}

function attachUncertainties(
  uncertainties: readonly MappedColumn[],
  quantities: readonly MappedColumn[],
  problems: Problems,
): ReadonlyMap<MappedColumn, MappedColumn> {
  const found = new Map<MappedColumn, MappedColumn[]>();
  for (const sigma of uncertainties) {
    const of = sigma.column.of?.normalize("NFC");
    const place = { column: sigma.header ?? sigma.name };
    if (of === undefined) {
      problems.error("sigma-of-nothing", `"${place.column}" is an uncertainty and does not say of which quantity, so it is not used. Say which one.`, place);
      continue;
    }
    const quantity = quantities.find((other) => other.name === of) ?? quantities.find((other) => other.header !== undefined && tidy(other.header) === tidy(of));
    if (quantity === undefined) {
      problems.error(
        "sigma-of-nothing",
        `"${place.column}" is the uncertainty of "${of}", and no column of a quantity has that name. It is not used; name the quantity's column.`,
        place,
      );
      continue;
    }
    found.set(quantity, [...(found.get(quantity) ?? []), sigma]);
  }
  const single = new Map<MappedColumn, MappedColumn>();
  for (const [quantity, sigmas] of found) {
    const [only] = sigmas;
    if (sigmas.length === 1 && only !== undefined) single.set(quantity, only);
    else
      problems.error(
        "sigma-twice",
        `${quantity.name} has ${sigmas.length} columns of uncertainties (${listed(sigmas.map((sigma) => `"${sigma.header ?? sigma.name}"`))}); none is used, and its σ are unknown. Keep one.`,
        { column: quantity.name },
      );
  }
  return single;
}

const chemical: ReadonlySet<string> = new Set(["mass fraction", "amount fraction", "amount per mass", "atoms per million Si", "dex"]);

function readMeaning(grid: Grid, mapped: MappedColumn, problems: Problems): MappedQuantity | undefined {
  const { column, name } = mapped;
  const species = column.species === undefined ? undefined : parseSpecies(column.species);
  if (column.species !== undefined && species === undefined)
    problems.error(
      "species-unknown",
      `"${column.species}" of the column ${name} is no species we know. Write an element or an oxide, such as Mg, SiO2 or FeOt, or leave it out. The column is read as a quantity without a species.`,
      { column: name },
    );
  const unit = unitOf(grid, mapped, species?.name, problems);
  if (unit === undefined) return undefined;
  if (species !== undefined && !chemical.has(unit.dimension) && unit.dimension !== "dimensionless" && unit.dimension !== "relative deviation")
    problems.warning("species-unit", `The column ${name} measures ${species.name} in ${unit.symbol}, which is no unit of an amount. Check its unit.`, {
      column: name,
    });
  const ratio = unit.dimension === "dimensionless";
  if (column.basis !== undefined && !ratio)
    problems.warning(
      "basis-without-ratio",
      `The column ${name} is in ${unit.symbol} and states a basis, which only ratios in the unit 1 have. The basis is not used.`,
      {
        column: name,
      },
    );
  return {
    ...mapped,
    ...(species === undefined ? {} : { species: species.name }),
    unit,
    ...(column.basis !== undefined && ratio ? { basis: column.basis } : {}),
    ...(column.as === undefined ? {} : { inCells: column.as }),
  };
}

/** The unit a block gives, else what the source itself says; a species without either is never given one by guess. */
function unitOf(grid: Grid, mapped: MappedColumn, species: string | undefined, problems: Problems): Unit | undefined {
  const { column, name } = mapped;
  if (column.unit !== undefined) {
    const unit = parseUnit(column.unit);
    if (unit === undefined)
      problems.error(
        "unit-unknown",
        `"${column.unit}" of the column ${name} is no unit we know, so the column is not read. Write a unit such as wt%, µg/g, mol/kg, K, or 1 for a plain number.`,
        { column: name },
      );
    return unit;
  }
  const line = grid.units?.[mapped.at];
  const said = (mapped.header === undefined ? undefined : readHeader(mapped.header).unit) ?? (line === undefined || line === "" ? undefined : parseUnit(line));
  if (said !== undefined) return said;
  if (species === undefined) return units["1"];
  problems.error(
    "unit-missing",
    `The column ${name} measures ${species}, and neither the page nor the source says in which unit. It is not read; give it a unit, such as wt% or µg/g.`,
    { column: name },
  );
  return undefined;
}

function readSigma(sigma: MappedColumn, of: MappedQuantity, problems: Problems): MappedSigma | undefined {
  const { column } = sigma;
  const header = sigma.header ?? sigma.name;
  if (column.as === undefined) {
    problems.error(
      "sigma-kind-missing",
      `"${header}" does not say what kind of uncertainty it is, and 1σ read as 2σ would be wrong by a factor of two. It is not used; say whether it is 1 sigma, 2 sigma, relative or a 95 % interval.`,
      { column: header },
    );
    return undefined;
  }
  if (column.as === "1 sigma relative %" || column.as === "2 sigma relative %") return { ...sigma, kind: column.as, unit: of.unit };
  const unit = column.unit === undefined ? of.unit : parseUnit(column.unit);
  if (unit === undefined || unit.dimension !== of.unit.dimension) {
    problems.error(
      "sigma-unit",
      `"${header}" is in ${column.unit ?? ""}, and ${of.name} in ${of.unit.symbol}: they cannot belong together. It is not used; correct its unit.`,
      { column: header },
    );
    return undefined;
  }
  return { ...sigma, kind: column.as, unit };
}

/** One column of sample names and one of classes. */
function oneOfEach(made: readonly (MappedColumn | MappedQuantity)[], problems: Problems): readonly (MappedColumn | MappedQuantity)[] {
  let kept = made;
  for (const role of ["sample", "class"] as const) {
    const having = kept.filter((mapped) => mapped.column.role === role);
    if (having.length <= 1) continue;
    problems.error(
      "role-twice",
      `${having.length} columns have the role ${role} (${listed(having.map((mapped) => mapped.name))}); ${having[0]?.name ?? ""} is used. Give the others the role text.`,
      { field: "columns" },
    );
    kept = kept.filter((mapped) => mapped.column.role !== role || mapped === having[0]);
  }
  return kept;
}
