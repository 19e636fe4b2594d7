"use client";

import { useCallback, useMemo } from "react";
import { pickedIndices } from "@/app/_blocks/shared/picks";
import type { PageView } from "@/app/_page/contract";
import { Chemical } from "@/app/_ui/Chemical";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { TickStrip } from "@/app/_ui/TickStrip";
import type { Table } from "@/cells";
import { columnCounts } from "./cellWords";

/** How many of each class are in use, in the page's order of classes. */
function classCounts(table: Table, view: PageView): { readonly name: string; readonly index: number; readonly n: number }[] {
  const counts = new Map<string, number>();
  table.classes.forEach((name, i) => {
    if (name !== "" && !table.setAside[i]) counts.set(name, (counts.get(name) ?? 0) + 1);
  });
  return [...counts].map(([name, n]) => ({ name, n, index: view.classIndex(name) })).sort((a, b) => a.index - b.index);
}

export interface FoldedTableProps {
  readonly table: Table;
  readonly view: PageView;
  /** A table made of tables is told by its classes, any other by its strips. */
  readonly byClass: boolean;
}

/** A table folded to its heads: one strip a quantity, or how many there are of each class. */
export function FoldedTable({ table, view, byClass }: FoldedTableProps) {
  const classes = useMemo(() => classCounts(table, view), [table, view]);
  const picked = useMemo(() => pickedIndices(table, view.picked), [table, view.picked]);
  const classOf = useCallback((index: number) => view.classIndex(table.classes[index] ?? ""), [table, view]);
  if (byClass && classes.length > 0)
    return (
      <ul className="flex flex-wrap gap-x-4 gap-y-1 py-1 text-margin">
        {classes.map((one) => (
          <li key={one.name} className="inline-flex items-center gap-1.5">
            <ClassMarker index={one.index} />
            {one.name} <span className="text-second">{one.n}</span>
          </li>
        ))}
      </ul>
    );
  return (
    <dl className="grid grid-cols-[repeat(auto-fill,minmax(240px,1fr))] gap-x-8 gap-y-1 py-1">
      {table.columns.map((column) =>
        column.kind === "text" ? null : (
          <div key={column.name} className="grid grid-cols-[64px_1fr_auto] items-end gap-3 text-margin">
            <dt className="truncate font-semibold">
              <Chemical name={column.name} />
            </dt>
            <dd>
              <TickStrip
                values={column.value}
                hide={table.setAside}
                classOf={classOf}
                picked={picked}
                height={16}
                label={`${column.name}: one tick a sample`}
              />
            </dd>
            <dd className="min-w-12 text-right text-second">{columnCounts(column, table.setAside)}</dd>
          </div>
        ),
      )}
    </dl>
  );
}
