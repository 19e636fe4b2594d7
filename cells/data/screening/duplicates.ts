import { listed } from "../problems";
import type { Flags } from "./flags";
import type { Table } from "../../table/table";

/** Samples that stand in several rows under one name, letters of either case alike. */
export function screenDuplicates(table: Table, flags: Flags): void {
  const rows = new Map<string, number[]>();
  for (let row = 0; row < table.rows; row++) {
    const name = (table.samples[row] ?? "").trim().normalize("NFC").toLowerCase().replace(/\s+/gu, " ");
    if (name === "" || table.setAside[row] === 1) continue;
    const known = rows.get(name);
    if (known === undefined) rows.set(name, [row]);
    else known.push(row);
  }
  for (const same of rows.values()) {
    if (same.length < 2) continue;
    for (const row of same.slice(1)) {
      const others = same.filter((other) => other !== row).map((other) => String(table.rowIds[other] ?? other + 1));
      flags.flag("duplicate", row, undefined, `also in ${others.length === 1 ? "row" : "rows"} ${listed(others, 3)}`);
    }
  }
}
