import { State } from "../../quantity/state";
import { isVolatile, measuredColumns, oxides, type Measured } from "../../species";
import type { QuantityColumn, Table } from "../../table/table";
import type { Problems } from "../problems";
import type { Flags } from "./flags";

/** Range of totals of volatile-free rocks, wt%; common practice, no source. */
const COMMON = { from: 98.5, to: 101.5 } as const;
/** Without these a sum of oxides means nothing. */
const majors = ["SiO2", "Al2O3", "MgO", "CaO"] as const;
const known: ReadonlySet<string> = new Set(oxides);

export interface TotalsRange {
  readonly from: number;
  readonly to: number;
}

/** Totals of a table's rows, and the columns in them beside the iron. */
export interface Totals {
  readonly total: Float64Array;
  readonly columns: readonly QuantityColumn[];
}

/** The columns whose sum is the total of a row. */
interface Counted {
  /** Everything but the iron. */
  readonly columns: readonly QuantityColumn[];
  /** The majors, which a row must have for its total to mean anything. */
  readonly needed: readonly QuantityColumn[];
  /** Ways in which the table gives all the iron; a row counts the first that it has whole. */
  readonly iron: readonly (readonly QuantityColumn[])[];
}

/**
 * Totals of oxides in wt%, row by row; NaN where a row lacks a major oxide or a part of its iron, undefined where the table has
 * too few oxides for a total to mean anything. Iron counts once: a total as it is given (FeOt or Fe2O3t), else every part the
 * table has, metal and troilite by their own mass. Where the table leaves open whether its iron is all of it, there is no total.
 */
export function oxideTotals(table: Table, problems: Problems): Totals | undefined {
  const counted = countedColumns(table, problems);
  return counted === undefined ? undefined : { total: sumsOf(table, counted), columns: counted.columns };
}

/**
 * Sums of the same oxides and elements without the volatiles (loss on ignition, water, carbon and sulphur), in wt%; NaN and
 * undefined as {@link oxideTotals} has them.
 */
export function volatileFreeSums(table: Table, problems: Problems): Float64Array | undefined {
  const counted = countedColumns(table, problems);
  if (counted === undefined) return undefined;
  return sumsOf(table, { ...counted, columns: counted.columns.filter(({ name, species }) => name !== "LOI" && species !== undefined && !isVolatile(species)) });
}

function sumsOf(table: Table, counted: Counted): Float64Array {
  const total = new Float64Array(table.rows).fill(Number.NaN);
  for (let row = 0; row < table.rows; row++) {
    const given = (column: QuantityColumn): boolean => column.state[row] === State.present;
    if (!counted.needed.every(given)) continue;
    const iron = counted.iron.find((way) => way.every(given));
    if (iron === undefined) continue;
    let sum = 0;
    for (const column of counted.columns) if (given(column)) sum += 100 * (column.value[row] ?? Number.NaN);
    for (const column of iron) sum += 100 * (column.value[row] ?? Number.NaN);
    total[row] = sum;
  }
  return total;
}

/** Flags totals outside a range, for rows in use. */
export function screenTotals(table: Table, totals: Totals, flags: Flags, rangeOf: (row: number) => TotalsRange | undefined = () => undefined): void {
  totals.total.forEach((total, row) => {
    const range = rangeOf(row) ?? COMMON;
    if (table.setAside[row] === 1 || Number.isNaN(total) || (total >= range.from && total <= range.to)) return;
    const missing = totals.columns.filter((column) => column.state[row] !== State.present).map((column) => column.name);
    const without = missing.length === 0 ? "" : `, without ${missing.slice(0, 4).join(", ")}${missing.length > 4 ? " …" : ""}`;
    const side = total < range.from ? `below ${range.from.toFixed(1)}` : `above ${range.to.toFixed(1)}`;
    flags.flag("total", row, undefined, `total ${total.toFixed(1)} wt%, ${side}${without}`);
  });
}

function countedColumns(table: Table, problems: Problems): Counted | undefined {
  const measured = measuredColumns(table).filter(({ column, species }) => species !== undefined && column.unit.dimension === "mass fraction");
  const byName = (name: string): QuantityColumn | undefined => measured.find(({ species }) => species?.name === name)?.column;
  const needed = majors.map(byName);
  if (!needed.every((column) => column !== undefined)) return undefined;
  const iron = waysOfIron(measured);
  if (iron === "untold") {
    problems.note(
      "totals-iron",
      "Totals of oxides are not checked: the table does not say whether its column of iron is all the iron or a part. Set its species to say so.",
    );
    return undefined;
  }
  if (iron.length === 0) return undefined;
  const ignition = table.columns.find(
    (column): column is QuantityColumn => column.kind === "quantity" && column.name === "LOI" && column.unit.dimension === "mass fraction",
  );
  return { columns: [...oxidesOf(measured, ignition !== undefined), ...(ignition === undefined ? [] : [ignition])], needed, iron };
}

/** Every oxide once, and elements of which no oxide is there; never iron. */
function oxidesOf(measured: readonly Measured[], hasIgnition: boolean): readonly QuantityColumn[] {
  const taken = new Set<string>(["Fe", "O"]);
  const found: QuantityColumn[] = [];
  const hasTroilite = measured.some(({ species }) => species?.name === "FeS");
  if (hasTroilite) taken.add("S");
  for (const oxide of [true, false])
    for (const { column, species } of measured) {
      if (species === undefined || taken.has(species.element) || known.has(species.name) !== oxide) continue;
      // Loss on ignition holds the volatiles already.
      if (hasIgnition && isVolatile(species.name)) continue;
      taken.add(species.element);
      found.push(column);
    }
  return found;
}

/** Totals first, then all the parts together; "untold" where nobody says how much of the iron a lone column is. */
function waysOfIron(measured: readonly Measured[]): readonly (readonly QuantityColumn[])[] | "untold" {
  const iron = measured.filter(({ species }) => species?.element === "Fe");
  // Iron as the element has its oxygen nowhere, so an oxide total alone says what the iron adds.
  const totals = ["FeOt", "Fe2O3t"].flatMap((name) => iron.filter(({ species }) => species?.name === name)).map(({ column }) => [column]);
  const parts = iron.filter(({ species }) => species?.iron !== "total");
  const bare = parts.some(({ species }) => species?.name === "Fe");
  const forms = new Map<string, QuantityColumn>();
  for (const { column, species } of parts) {
    const form = species?.name.replace(/_ferr(?:ous|ic)$/u, "") ?? "";
    if (!forms.has(form)) forms.set(form, column);
  }
  if (forms.size > 1 && !bare) return [...totals, [...forms.values()]];
  if (totals.length > 0 || forms.size === 0) return totals;
  return bare || parts.every(({ species }) => species?.iron === "untold") ? "untold" : [];
}
