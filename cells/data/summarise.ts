import type { ColumnSummary } from "../page/results";
import { State } from "../quantity/state";
import type { Table } from "../table/table";
import { isSubstituted } from "./draft";

/**
 * What each column holds, over the samples in use. A value that a declared substitution stands in for counts in `n` and in
 * `belowDetection` both: it is a number, and nobody measured it.
 */
export function summarise(table: Table): readonly ColumnSummary[] {
  return table.columns.map((column): ColumnSummary => {
    const counts = { n: 0, missing: 0, belowDetection: 0, setAside: 0, assumed: 0, withoutSigma: 0 };
    for (let row = 0; row < table.rows; row++) {
      if (table.setAside[row] === 1) continue;
      if (column.kind === "text") {
        if (column.text[row] === "") counts.missing++;
        else counts.n++;
        continue;
      }
      switch (column.state[row]) {
        case State.present:
          counts.n++;
          if (isSubstituted(column, row)) counts.belowDetection++;
          if (column.assumed[row] === 1) counts.assumed++;
          if (Number.isNaN(column.sigma[row] ?? Number.NaN)) counts.withoutSigma++;
          break;
        case State.belowDetection:
          counts.belowDetection++;
          break;
        case State.setAside:
          counts.setAside++;
          break;
        case State.missing:
          counts.missing++;
          break;
      }
    }
    return column.kind === "text"
      ? { name: column.name, role: column.role, unit: "", ...counts }
      : { name: column.name, role: "quantity", unit: column.unit.symbol, ...counts };
  });
}
