import { counted } from "@/app/_ui/concise";
import type { PageResults } from "@/cells";
import type { PageBlock } from "@/realtime/document";

/** Everything that is not simply a value in use, over the tables of a page that hold values of their own. */
export interface PageCounts {
  readonly samples: number;
  readonly setAside: number;
  readonly valuesSetAside: number;
  readonly amended: number;
  readonly missing: number;
  readonly belowDetection: number;
  readonly assumed: number;
  /** Errors, in all blocks. */
  readonly problems: number;
}

/** Stacked and joined tables repeat what others hold, and are left out. */
export function countPage(blocks: readonly PageBlock[], results: PageResults | null): PageCounts {
  const counts = { samples: 0, setAside: 0, valuesSetAside: 0, amended: 0, missing: 0, belowDetection: 0, assumed: 0, problems: 0 };
  for (const { block } of blocks) {
    const result = results?.blocks.get(block.id);
    if (result === undefined) continue;
    counts.problems += result.problems.filter((p) => p.severity === "error").length;
    if (block.kind !== "data" || result.kind !== "data" || block.stack !== undefined || block.join !== undefined) continue;
    counts.samples += result.table?.rows ?? result.samples;
    counts.setAside += result.setAside;
    counts.valuesSetAside += result.valuesSetAside;
    counts.amended += result.amended;
    for (const column of result.columns) {
      counts.missing += column.missing;
      counts.belowDetection += column.belowDetection;
      counts.assumed += column.assumed;
    }
  }
  return counts;
}

/** "30 samples, 29 in use. 1 set aside, 1 amended, 3 missing. 1 problem." */
export function countsInWords(counts: PageCounts): string {
  const first = counts.samples === 0 ? "No samples yet." : `${counted(counts.samples, "sample")}, ${counts.samples - counts.setAside} in use.`;
  const parts = [
    counts.setAside > 0 && `${counts.setAside} set aside`,
    counts.valuesSetAside > 0 && `${counted(counts.valuesSetAside, "value")} set aside`,
    counts.amended > 0 && `${counts.amended} amended`,
    counts.missing > 0 && `${counts.missing} missing`,
    counts.belowDetection > 0 && `${counts.belowDetection} below detection`,
    counts.assumed > 0 && `${counts.assumed} σ assumed`,
  ].filter((part): part is string => part !== false);
  const second = parts.length > 0 ? ` ${parts.join(", ")}.` : "";
  return `${first}${second} ${counts.problems === 0 ? "No problems." : `${counted(counts.problems, "problem")}.`}`;
}
