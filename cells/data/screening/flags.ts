import type { ScreeningFlag } from "../../page/results";
import type { Table } from "../../table/table";
import { counted, type Problems } from "../problems";

/** Flags of one kind that are kept; beyond that a table needs another look than one flag at a time. */
const MOST = 500;

const kinds: Readonly<Record<ScreeningFlag["code"], string>> = {
  total: "totals",
  negative: "negative values",
  duplicate: "duplicate samples",
  "far from class": "values far from their class",
  "unit magnitude": "values that do not fit their unit",
  "reference material": "biases against reference materials",
  "species disagree": "species that disagree",
};

/** Collects what screening notices. It never changes a table. */
export class Flags {
  private readonly found: ScreeningFlag[] = [];
  private readonly counts = new Map<ScreeningFlag["code"], number>();

  constructor(
    readonly table: Table,
    private readonly problems: Problems,
  ) {}

  flag(code: ScreeningFlag["code"], row: number, column: string | undefined, text: string): void {
    const count = (this.counts.get(code) ?? 0) + 1;
    this.counts.set(code, count);
    if (count > MOST) return;
    const { rowIds, samples } = this.table;
    this.found.push({ code, row: rowIds[row] ?? row + 1, sample: samples[row] ?? "", ...(column === undefined ? {} : { column }), text });
  }

  list(): readonly ScreeningFlag[] {
    for (const [code, count] of this.counts)
      if (count > MOST)
        this.problems.note(
          "screening-many",
          `Screening noticed ${kinds[code]} ${count} times; the first ${MOST} are shown (${counted(count - MOST, "more", "more")}).`,
        );
    return this.found;
  }
}

/** A canonical value as people read it in its unit, with so many significant digits. */
export function shown(canonical: number, unit: { readonly per: number; readonly offset: number; readonly symbol: string }, digits = 3): string {
  return `${String(Number(((canonical - unit.offset) * unit.per).toPrecision(digits))).replace(/^-/u, "−")}${unit.symbol === "1" ? "" : ` ${unit.symbol}`}`;
}
