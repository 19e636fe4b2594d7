"use client";

import { useEffect, useId, useMemo, useRef, useState, type KeyboardEvent, type MouseEvent } from "react";
import { originsOf, pickedIndices } from "@/app/_blocks/shared/picks";
import { FRAME_ATTRIBUTE } from "@/app/_page/rail/useRailBlocks";
import { SHOW_ROW_EVENT, type ShowRow } from "@/app/_page/goTo";
import type { PageView } from "@/app/_page/contract";
import type { MenuItem } from "@/app/_ui/Menu";
import type { DataBlock, DataResult, RowId } from "@/cells";
import { CellField } from "./CellField";
import { GridHead } from "./GridHead";
import { between, movedBy, type CellPlace } from "./gridKeys";
import { rowShown, type GridColumn, type GridModel } from "./gridModel";
import { GridRow } from "./GridRow";
import { othersPicks, rowDrawer } from "./gridRows";
import type { ActiveCell } from "./useActiveCell";
import { ROW_HEIGHT, useRowWindow } from "./useRowWindow";
import "./data.css";

const HEAD_HEIGHT = 88;
const TOTAL_WIDTH = 88;
/** So many rows stand on the page; longer tables scroll. */
const MOST_SEEN = 20;

/** What is done at a cell, decided by the block: typed cells are edited, values of a source amended. */
export interface GridActions {
  /** Enter, F2 or a double click at a cell of a source. */
  readonly onOpen?: ((place: CellPlace) => void) | undefined;
  /** The new text of a typed cell; a sentence where it is refused. */
  readonly onType?: ((row: RowId, column: string, text: string) => string | null) | undefined;
  readonly onPasteTable?: ((place: CellPlace, text: string) => void) | undefined;
  readonly onDelete?: ((place: CellPlace) => void) | undefined;
  readonly itemsOf?: ((column: GridColumn) => readonly MenuItem[]) | undefined;
}

export interface DataGridProps extends GridActions {
  readonly block: DataBlock;
  readonly blockKey: string;
  readonly result: DataResult | undefined;
  readonly view: PageView;
  readonly model: GridModel;
  readonly cell: ActiveCell;
}

/** The table itself: virtual rows, one active cell, picked rows, typing where the table is typed. */
export function DataGrid({ block, blockKey, result, view, model, cell, onOpen, onType, onPasteTable, onDelete, itemsOf }: DataGridProps) {
  const id = useId();
  const form = view.settings.uncertainty;
  const table = result?.table;
  const totals = model.typed ? null : (result?.totals ?? null);
  const draw = useMemo(() => rowDrawer(block, result, model, totals, form, view.classIndex), [block, result, model, totals, form, view]);
  const picked = useMemo(() => pickedIndices(table, view.picked), [table, view.picked]);
  const pickedSet = useMemo(() => new Set(picked), [picked]);
  const others = othersPicks(view, model);
  const { place: active, rowIds, go: activate, tookRow } = cell;
  const rows = rowIds.length;
  const columns = model.columns.length + (totals === null ? 0 : 1);
  const seen = Math.min(rows, MOST_SEEN);
  const shown = useRowWindow(rows, seen, HEAD_HEIGHT);
  const [typing, setTyping] = useState<string | null>(null);
  const anchor = useRef<number | null>(null);
  const { reveal, scroller } = shown;

  const go = (place: CellPlace) => {
    activate(place);
    setTyping(null);
    reveal(place.row);
  };
  /** Begins a cell's text; what is typed stays with this row, wherever others move it meanwhile. */
  const begin = (place: CellPlace, text: string) => {
    activate(place);
    setTyping(text);
  };

  useEffect(() => {
    const frame = document.querySelector(`[${FRAME_ATTRIBUTE}="${CSS.escape(blockKey)}"]`);
    const show = (event: Event) => {
      const { row, column } = (event as CustomEvent<ShowRow>).detail;
      const at = rowShown(model, block.id, row);
      if (at < 0) return;
      const c = model.columns.findIndex((one) => one.name === column);
      // A σ that has no column here stands with its value.
      const ofSigma = model.columns.findIndex((one) => column !== undefined && (one.quantity?.sigmaHeader === column || one.quantity?.header === column));
      activate({ row: at, column: Math.max(0, c < 0 ? ofSigma : c) });
      reveal(at);
      scroller.current?.focus({ preventScroll: true });
    };
    frame?.addEventListener(SHOW_ROW_EVENT, show);
    return () => frame?.removeEventListener(SHOW_ROW_EVENT, show);
  }, [block.id, blockKey, model, activate, reveal, scroller]);

  const pick = (row: number, way: "only" | "toggle" | "range") => {
    if (table === undefined || row >= table.rows || view.mode === "frozen") return;
    const from = anchor.current ?? row;
    const next =
      way === "range"
        ? between(from, row)
        : way === "toggle"
          ? pickedSet.has(row)
            ? picked.filter((r) => r !== row)
            : [...picked, row]
          : pickedSet.has(row) && picked.length === 1
            ? []
            : [row];
    if (way !== "range") anchor.current = row;
    view.pick(originsOf(table, next));
  };

  const placeOf = (event: MouseEvent): CellPlace | null => {
    const target = event.target as Element;
    const row = target.closest("[data-row]")?.getAttribute("data-row");
    const column = target.closest("[data-column]")?.getAttribute("data-column");
    return row == null || column == null ? null : { row: Number(row), column: Number(column) };
  };
  const isSample = (place: CellPlace) => model.columns[place.column]?.role === "sample";
  const editable = (place: CellPlace) => onType !== undefined && place.column < model.columns.length;

  const onClick = (event: MouseEvent) => {
    const place = placeOf(event);
    if (place === null || (typing !== null && active?.row === place.row && active.column === place.column)) return;
    go(place);
    if (event.shiftKey) pick(place.row, "range");
    else if (event.ctrlKey || event.metaKey) pick(place.row, "toggle");
    else if (isSample(place) && onType === undefined) pick(place.row, "only");
  };
  const onDoubleClick = (event: MouseEvent) => {
    const place = placeOf(event);
    if (place === null) return;
    if (editable(place)) begin(place, "");
    else onOpen?.(place);
  };
  const onKeyDown = (event: KeyboardEvent<HTMLElement>) => {
    if (typing !== null || event.altKey || event.target !== event.currentTarget) return;
    const at = active ?? { row: 0, column: 0 };
    const moved = movedBy(event, at, rows, columns);
    if (moved !== undefined) {
      event.preventDefault();
      if (event.shiftKey && moved.row !== at.row) {
        anchor.current ??= at.row;
        pick(moved.row, "range");
      }
      return go(active === null ? at : moved);
    }
    if (event.key === " ") {
      event.preventDefault();
      return pick(at.row, event.shiftKey ? "range" : "toggle");
    }
    if (event.key === "Enter" || event.key === "F2") {
      event.preventDefault();
      if (active === null) return go(at);
      if (editable(at)) return begin(at, "");
      return onOpen?.(at);
    }
    if (event.key === "Escape") return view.pick([]);
    if ((event.key === "Delete" || event.key === "Backspace") && onDelete !== undefined) return onDelete(at);
    if (event.key.length === 1 && !event.ctrlKey && !event.metaKey && editable(at) && active !== null) {
      event.preventDefault();
      begin(at, event.key);
    }
  };

  const field = (place: CellPlace) => {
    const column = model.columns[place.column];
    const row = rowIds[place.row];
    if (typing === null || column === undefined || row === undefined || onType === undefined) return null;
    const before = block.typed?.[place.row]?.cells[column.name] ?? "";
    return (
      <CellField
        initial={typing === "" ? before : typing}
        label={`${column.name}, row ${place.row + 1}`}
        onDone={(text, move) => {
          const isNew = text !== null && text !== before;
          const fault = isNew ? onType(row, column.name, text) : null;
          if (fault !== null) return fault;
          if (isNew) tookRow(row);
          const next =
            move === "down"
              ? // Below a row that was free until now stands another one before long.
                { row: Math.min(isNew ? rows : rows - 1, place.row + 1), column: place.column }
              : move === "right"
                ? { row: place.row, column: Math.min(model.columns.length - 1, place.column + 1) }
                : move === "left"
                  ? { row: place.row, column: Math.max(0, place.column - 1) }
                  : place;
          go(next);
          if (move !== null || text === null) scroller.current?.focus();
          return null;
        }}
      />
    );
  };

  const template =
    model.columns.map((c) => (c.role === "sample" ? `${c.width}px` : `minmax(${c.width}px, 1fr)`)).join(" ") +
    (totals === null ? "" : ` minmax(${TOTAL_WIDTH}px, 0.8fr)`);
  const least = model.columns.reduce((sum, c) => sum + c.width, totals === null ? 0 : TOTAL_WIDTH);
  const drawn: number[] = [];
  for (let r = shown.first; r < shown.end; r++) drawn.push(r);
  // A cell that is being typed in keeps its field when the table is scrolled away from it.
  if (typing !== null && active !== null && (active.row < shown.first || active.row >= shown.end)) drawn.push(active.row);
  return (
    <div
      ref={scroller}
      role="grid"
      tabIndex={0}
      aria-label={`Table ${block.name ?? block.id}: ${model.rows} rows, ${columns} columns. Arrows move, Space picks a row, Enter opens a cell.`}
      aria-rowcount={rows + 1}
      aria-colcount={columns}
      aria-multiselectable="true"
      {...(active === null ? {} : { "aria-activedescendant": `${id}-${active.row}-${active.column}` })}
      className="grid-scroll"
      style={{ maxHeight: HEAD_HEIGHT + seen * ROW_HEIGHT + 2 }}
      onScroll={shown.onScroll}
      onClick={onClick}
      onDoubleClick={onDoubleClick}
      onKeyDown={onKeyDown}
      onPaste={(event) => {
        if (typing !== null || active === null || onPasteTable === undefined) return;
        event.preventDefault();
        onPasteTable(active, event.clipboardData.getData("text/plain"));
      }}
    >
      <div role="presentation" style={{ ["--columns" as string]: template, minWidth: least }}>
        <GridHead model={model} view={view} totals={totals} picked={picked} itemsOf={itemsOf} />
        <div role="rowgroup" className="relative" style={{ height: rows * ROW_HEIGHT }}>
          {drawn.map((r) => (
            <GridRow
              key={rowIds[r] ?? r}
              id={id}
              index={r}
              top={r * ROW_HEIGHT}
              cells={draw(r)}
              picked={pickedSet.has(r)}
              aside={table?.setAside[r] === 1}
              active={active?.row === r ? active.column : -1}
              field={active?.row === r && typing !== null ? field(active) : null}
              others={others.get(r) ?? nobody}
            />
          ))}
        </div>
      </div>
    </div>
  );
}

const nobody: readonly { readonly name: string; readonly color: string }[] = [];
