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
import { oxideTotals, screenTotals } from "./totals";

/** Everything that screening notices in the samples in use. It only flags: people set aside. */
export function screen(block: DataBlock, table: Table, problems: Problems): { readonly flags: readonly ScreeningFlag[]; readonly totals?: Float64Array } {
  const flags = new Flags(table, problems);
  const totals = oxideTotals(table, problems);
  if (totals !== undefined) screenTotals(table, totals, flags, block.totals);
  screenMagnitudes(table, flags);
  screenDuplicates(table, flags);
  screenClasses(table, flags);
  screenReferenceMaterials(table, flags);
  screenSpecies(table, flags);
  return { flags: flags.list(), ...(totals === undefined ? {} : { totals: totals.total }) };
}
