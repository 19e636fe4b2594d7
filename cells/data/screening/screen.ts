import type { ScreeningFlag } from "../../page/results";
import type { DataBlock } from "../../page/schema";
import type { Table } from "../../table/table";
import type { Problems } from "../problems";
import { screenClasses } from "./classes";
import { screenDuplicates } from "./duplicates";
import { Flags } from "./flags";
import { screenMagnitudes } from "./magnitudes";
import { screenReferenceMaterials } from "./referenceMaterials";
import { screenSpecies } from "./species";
import { oxideTotals, screenTotals, type TotalsRange } from "./totals";

/** Everything that screening notices in the samples in use. It only flags: people set aside. */
export function screen(
  block: DataBlock,
  table: Table,
  problems: Problems,
  rangeOfTable: (handle: string) => TotalsRange | undefined = () => undefined,
): { readonly flags: readonly ScreeningFlag[]; readonly totals?: Float64Array } {
  const flags = new Flags(table, problems);
  const totals = oxideTotals(table, problems);
  // A table made of others keeps to the ranges set where its rows were read, unless it sets one of its own.
  const inherited = (row: number): TotalsRange | undefined => widest((table.origins[row] ?? []).map((origin) => rangeOfTable(origin.table)));
  if (totals !== undefined) screenTotals(table, totals, flags, (row) => block.totals ?? inherited(row));
  screenMagnitudes(table, flags);
  screenDuplicates(table, flags);
  screenClasses(table, flags);
  screenReferenceMaterials(table, flags);
  screenSpecies(table, flags);
  return { flags: flags.list(), ...(totals === undefined ? {} : { totals: totals.total }) };
}

/** Of merged rows from several tables, the range that holds all of theirs; undefined where none sets one. */
function widest(ranges: readonly (TotalsRange | undefined)[]): TotalsRange | undefined {
  let found: TotalsRange | undefined;
  for (const range of ranges)
    if (range !== undefined) found = found === undefined ? range : { from: Math.min(found.from, range.from), to: Math.max(found.to, range.to) };
  return found;
}
