import type { DataBlock } from "../page/schema";
import { underRenormalisation } from "../species";
import type { QuantityColumn, Table, TableColumn } from "../table/table";
import { counted, listed, Problems } from "./problems";
import { volatileFreeSums } from "./screening/totals";

/** What a table was renormalised from, for traces. */
export interface Renormalised {
  /** The table before. */
  readonly table: Table;
  /** What each row's values were multiplied by; NaN where the row is left as it was. */
  readonly factors: Float64Array;
}

/** Neither JSON nor a message between threads takes these along. */
const renormalisedKey = Symbol("renormalised");
const measuredKey = Symbol("measured");

type Kept = Table & { readonly [renormalisedKey]?: Renormalised | undefined; readonly [measuredKey]?: Table | undefined };

/** How this very table was renormalised; undefined where it was not, also where tables it is made of were. */
export function renormalisedOf(table: Table): Renormalised | undefined {
  return (table as Kept)[renormalisedKey];
}

/** The table with nothing renormalised, neither here nor in what it is made of: what screening looks at. */
export function asMeasured(table: Table): Table {
  return (table as Kept)[measuredKey] ?? table;
}

/** A table that was made of renormalised ones, with the one that the same steps make of what was measured. */
export function withMeasured(table: Table, measured: Table): Table {
  const made: Kept = { ...table, [renormalisedKey]: undefined, [measuredKey]: measured };
  return made;
}

/**
 * Anhydrous renormalisation, only where the block asks for it: in each row every oxide and element by mass, trace elements
 * included, is divided by the row's sum of those that count towards its total, without loss on ignition, water, carbon and
 * sulphur. σ and detection limits are divided alike, so that no ratio of two such values changes, in value or in σ. The error of
 * the sum is left out: it is common to the row, and the σ of the single values are then too large or too small by a part of it.
 * Volatiles stay as measured. Rows whose sum means nothing (a major oxide or the iron is missing) are left as they are, and
 * counted. Screening and its totals keep to what was measured. Cost: one pass over the values.
 */
export function renormalise(block: DataBlock, table: Table, problems: Problems): Table {
  if (block.renormalise === undefined) return table;
  const place = { field: "renormalise" };
  // Why there is no total is said where totals are checked.
  const sums = volatileFreeSums(table, new Problems(block.id));
  const factors = Float64Array.from({ length: table.rows }, (_, row) => factorOf(sums?.[row]));
  if (factors.every((factor) => Number.isNaN(factor))) {
    problems.warning(
      "renormalise-nothing",
      `${block.id} is to be renormalised volatile-free, and no row has a sum that means anything: that needs SiO2, Al2O3, MgO, CaO and all the iron, in mass fractions. Values stay as measured.`,
      place,
    );
    return table;
  }
  const columns = table.columns.map((column): TableColumn => (column.kind === "quantity" ? scaledColumn(column, factors) : column));
  const left = inUse(table).filter((row) => Number.isNaN(factors[row] ?? Number.NaN));
  const rows = inUse(table).length;
  const used = inUse(table).flatMap((row) => (Number.isNaN(factors[row] ?? Number.NaN) ? [] : [factors[row] ?? 1]));
  const stay = table.columns.flatMap((column) => (column.kind === "quantity" && underRenormalisation(column) === "as measured" ? [column.name] : []));
  problems.note(
    "renormalised",
    `Renormalised volatile-free: in ${counted(rows - left.length, "sample")} oxides and elements by mass are divided by their sum without volatiles${used.length === 0 ? "" : `, which multiplies them by ${between(used)}`}. Their σ are multiplied alike; the error of the sum itself is not counted. Ratios do not change, and the total is the one measured.${stay.length === 0 ? "" : ` ${listed(stay)} ${stay.length === 1 ? "stays" : "stay"} as measured.`}`,
    place,
  );
  if (left.length > 0)
    problems.warning(
      "renormalise-left",
      `${counted(left.length, "sample")} without a total that means something ${left.length === 1 ? "is" : "are"} not renormalised, and ${left.length === 1 ? "stands" : "stand"} as measured beside the others: ${listed(
        left.map((row) => nameOf(table, row)),
        4,
      )}. Set ${left.length === 1 ? "it" : "them"} aside where only renormalised values may count.`,
      place,
    );
  const some = left.length === 0 ? "" : `, ${counted(left.length, "sample")} without a total left as measured`;
  const said = `Values of ${block.id} are renormalised volatile-free${some}; their σ do not count the error of the sum.`;
  const made: Kept = {
    ...table,
    columns,
    renormalised: table.renormalised === undefined ? said : `${said} ${table.renormalised}`,
    [renormalisedKey]: { table, factors },
    [measuredKey]: asMeasured(table),
  };
  return made;
}

/** What a table made of tables says where some of its parts are renormalised. */
export function renormalisedText(tables: readonly Table[]): string | undefined {
  const said = [...new Set(tables.flatMap(({ renormalised }) => (renormalised === undefined ? [] : [renormalised])))];
  return said.length === 0 ? undefined : said.join(" ");
}

/** 100 wt% over the sum; NaN where there is none. */
function factorOf(sum: number | undefined): number {
  return sum !== undefined && sum > 0 && Number.isFinite(sum) ? 100 / sum : Number.NaN;
}

function inUse(table: Table): readonly number[] {
  return Array.from(table.setAside.keys()).filter((row) => table.setAside[row] !== 1);
}

function scaledColumn(column: QuantityColumn, factors: Float64Array): QuantityColumn {
  if (underRenormalisation(column) !== "scaled") return column;
  const scaled = (values: Float64Array): Float64Array =>
    values.map((value, row) => {
      const factor = factors[row] ?? Number.NaN;
      return Number.isNaN(factor) ? value : value * factor;
    });
  return { ...column, value: scaled(column.value), sigma: scaled(column.sigma), limit: scaled(column.limit) };
}

/** `1.012`, or `1.002 to 1.113` */
function between(factors: readonly number[]): string {
  const [least, most] = [factors.reduce((a, b) => Math.min(a, b)), factors.reduce((a, b) => Math.max(a, b))].map((factor) => factor.toPrecision(4));
  return least === most ? (least ?? "") : `${least ?? ""} to ${most ?? ""}`;
}

function nameOf(table: Table, row: number): string {
  const sample = table.samples[row] ?? "";
  return sample === "" ? `row ${table.rowIds[row] ?? row + 1}` : sample;
}
