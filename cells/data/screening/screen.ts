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
import { screenTotals } from "./totals";

/** Everything that screening notices in the samples in use. It only flags: people set aside. */
export function screen(block: DataBlock, table: Table, problems: Problems): readonly ScreeningFlag[] {
  const flags = new Flags(table, problems);
  screenTotals(table, flags, problems, block.totals);
  screenMagnitudes(table, flags);
  screenDuplicates(table, flags);
  screenClasses(table, flags);
  screenReferenceMaterials(table, flags);
  screenSpecies(table, flags);
  return flags.list();
}
