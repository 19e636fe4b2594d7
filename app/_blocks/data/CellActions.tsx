"use client";

import { useState } from "react";
import { Button } from "@/app/_ui/Button";
import type { PageView } from "@/app/_page/contract";
import type { DataBlock, RowId, Table } from "@/cells";
import { TOTAL_COLUMN } from "@/app/_page/margin/footnotes";
import { Menu } from "@/app/_ui/Menu";
import type { GridColumn, GridModel } from "./gridModel";
import { NearestDialog } from "./NearestDialog";
import { usesOf } from "./usesOf";
import type { CellPlace } from "./gridKeys";

export interface CellActionsProps {
  readonly block: DataBlock;
  readonly model: GridModel;
  readonly place: CellPlace;
  readonly view: PageView;
  readonly onAmend: (target: CellTarget) => void;
  readonly onSetAside: (target: CellTarget, whole: boolean) => void;
  readonly onUndo: (list: "amendments" | "setAside", entry: object) => void;
  readonly onDelete: ((row: RowId) => void) | undefined;
}

/** The cell that an action is about, by what it stays in the document: row, sample, column and the source's text. */
export interface CellTarget {
  readonly row: RowId;
  readonly sample: string;
  readonly column: GridColumn | undefined;
  readonly raw: string;
  readonly now: string;
}

export function sampleAt(table: Table | undefined, index: number): string {
  const sample = table?.samples[index] ?? "";
  return sample === "" ? `row ${table?.rowIds[index] ?? index + 1}` : sample;
}

/** What the document needs to know about a cell; undefined on rows and columns that hold nothing. */
export function targetAt(block: DataBlock, model: GridModel, place: CellPlace): CellTarget | undefined {
  const row = model.rowIds[place.row];
  if (row === undefined) return undefined;
  const column = model.columns[place.column];
  const raw = column?.quantity?.raw[place.row] ?? column?.text?.[place.row] ?? "";
  const amended =
    column === undefined ? undefined : block.amendments?.find((a) => a.row === row && (a.column === column.name || a.column === column.quantity?.header));
  return { row, sample: sampleAt(model.table, place.row), column, raw: amended?.was ?? raw, now: amended?.value ?? raw };
}

/** One line under a table: what can be done at the active cell. The same things are on the keyboard; nothing is only in a hover. */
export function CellActions({ block, model, place, view, onAmend, onSetAside, onUndo, onDelete }: CellActionsProps) {
  const [near, setNear] = useState<CellPlace["row"] | null>(null);
  const target = targetAt(block, model, place);
  if (target === undefined) return null;
  const { column, row, sample } = target;
  const isTotal = column === undefined || column.name === TOTAL_COLUMN;
  const made = block.stack !== undefined || block.join !== undefined;
  const origins = model.table?.origins[place.row] ?? [];
  const matches = (name: string) => name === column?.name || name === column?.quantity?.header;
  const amendment = (block.amendments ?? []).find((a) => a.row === row && matches(a.column));
  const valueAside = (block.setAside ?? []).find((s) => s.row === row && s.column !== undefined && matches(s.column));
  const rowAside = (block.setAside ?? []).find((s) => s.row === row && s.column === undefined);
  const canEdit = view.edits !== null;
  const uses = usesOf(block.id, place.row, view);
  return (
    <div
      role="toolbar"
      aria-label={`Actions on ${sample}`}
      className="chrome flex flex-wrap items-baseline gap-x-5 gap-y-1 border-b border-hairline py-1 text-margin"
    >
      <span className="text-second">
        {sample}
        {isTotal ? "" : `, ${column.name}`}
        {model.table?.renormalised === undefined || column?.quantity === undefined ? null : (
          <>
            , in the source <span className="font-mono">{target.raw === "" ? "empty" : target.raw}</span>
          </>
        )}
      </span>
      {column?.quantity !== undefined ? <Button onClick={() => view.trace({ block: block.id, name: column.name, index: place.row })}>Trace</Button> : null}
      {uses.length === 0 ? null : (
        <Menu items={uses} align="start">
          <Button>Where it is used</Button>
        </Menu>
      )}
      {view.nearest === undefined || model.table === undefined ? null : <Button onClick={() => setNear(place.row)}>Nearest</Button>}
      {near === null ? null : <NearestDialog block={block.id} index={near} sample={sampleAt(model.table, near)} view={view} onClose={() => setNear(null)} />}
      {made
        ? origins.map((origin) => (
            <Button
              key={`${origin.table} ${origin.row}`}
              onClick={() => view.show?.({ block: origin.table, row: origin.row, ...(column === undefined ? {} : { column: column.name }) })}
            >
              Go to its source in {origin.table}
            </Button>
          ))
        : null}
      {!canEdit || made ? null : (
        <>
          {isTotal || model.typed ? null : <Button onClick={() => onAmend(target)}>{amendment === undefined ? "Amend" : "Amend again"}</Button>}
          {amendment === undefined ? null : <Button onClick={() => onUndo("amendments", amendment)}>Take the amendment back</Button>}
          {column?.role !== "quantity" ? null : valueAside === undefined ? (
            <Button onClick={() => onSetAside(target, false)}>Set this value aside</Button>
          ) : (
            <Button onClick={() => onUndo("setAside", valueAside)}>Bring this value back</Button>
          )}
          {rowAside === undefined ? (
            <Button onClick={() => onSetAside(target, true)}>Set the sample aside</Button>
          ) : (
            <Button onClick={() => onUndo("setAside", rowAside)}>Bring the sample back</Button>
          )}
          {onDelete === undefined ? null : (
            <Button look="danger" onClick={() => onDelete(row)}>
              Delete the row
            </Button>
          )}
        </>
      )}
    </div>
  );
}
