"use client";

import { useCallback, useMemo, useState } from "react";
import type { RowId } from "@/cells";
import type { CellPlace } from "./gridKeys";
import { freshRowId } from "./typedText";

export interface ActiveCell {
  /** Where the active cell is now; null for none. */
  readonly place: CellPlace | null;
  /** Ids of all rows that are drawn: those of the table, those just made, and the free one for typing. */
  readonly rowIds: readonly RowId[];
  readonly go: (place: CellPlace) => void;
  /** Says that something was typed into a row; the free row becomes one of the table, and another one is free. */
  readonly tookRow: (id: RowId) => void;
}

/**
 * The active cell of a table. It stays with its row, not with its place: others add and delete rows meanwhile, and what is typed
 * or deleted must be in the row one is looking at.
 *
 * @param tableRows ids of the table's rows, in order
 * @param hasFree whether a free row stands at the end
 */
export function useActiveCell(tableRows: readonly RowId[], hasFree: boolean): ActiveCell {
  const [active, setActive] = useState<(CellPlace & { readonly id: RowId | undefined }) | null>(null);
  const [own, setOwn] = useState<{ readonly free: RowId; readonly made: readonly RowId[] }>(() => ({ free: freshRowId(), made: [] }));
  if (hasFree && tableRows.includes(own.free)) setOwn({ ...own, free: freshRowId() });
  else if (own.made.some((id) => tableRows.includes(id))) setOwn({ ...own, made: own.made.filter((id) => !tableRows.includes(id)) });
  const rowIds = useMemo(() => [...tableRows, ...own.made.filter((id) => !tableRows.includes(id)), ...(hasFree ? [own.free] : [])], [tableRows, own, hasFree]);
  const place = useMemo(() => {
    if (active === null) return null;
    const at = active.id === undefined || rowIds[active.row] === active.id ? active.row : rowIds.indexOf(active.id);
    // The row was deleted: what came after it has moved up.
    return { row: Math.max(0, Math.min(at < 0 ? active.row : at, rowIds.length - 1)), column: active.column };
  }, [active, rowIds]);
  const go = useCallback((next: CellPlace) => setActive({ ...next, id: rowIds[next.row] }), [rowIds]);
  const tookRow = useCallback((id: RowId) => setOwn((old) => (old.free === id ? { free: freshRowId(), made: [...old.made, id] } : old)), []);
  return useMemo(() => ({ place, rowIds, go, tookRow }), [place, rowIds, go, tookRow]);
}
