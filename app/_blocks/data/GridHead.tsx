"use client";

import { useCallback } from "react";
import { Chemical } from "@/app/_ui/Chemical";
import { classNames } from "@/app/_ui/classNames";
import { Menu, type MenuItem } from "@/app/_ui/Menu";
import { TickStrip } from "@/app/_ui/TickStrip";
import type { PageView } from "@/app/_page/contract";
import { columnCounts, unitWords } from "./cellWords";
import type { GridColumn, GridModel } from "./gridModel";

export interface GridHeadProps {
  readonly model: GridModel;
  readonly view: PageView;
  readonly totals: Float64Array | null;
  readonly picked: readonly number[];
  /** What can be done to a column; none where nothing can be edited. */
  readonly itemsOf?: ((column: GridColumn) => readonly MenuItem[]) | undefined;
}

function Name({ column, items }: { readonly column: GridColumn; readonly items: readonly MenuItem[] | undefined }) {
  const name = column.quantity?.species === column.name || column.role === "quantity" ? <Chemical name={column.name} /> : column.name;
  if (items === undefined || items.length === 0) return <span className="font-semibold">{name}</span>;
  return (
    <Menu items={items} align="start">
      <button type="button" className="max-w-full truncate font-semibold hover:text-indigo" aria-label={`Column ${column.name}: what can be done`}>
        {name}
      </button>
    </Menu>
  );
}

/** Heads of the columns: name, unit and σ, a strip of ticks, and what is in use and what is not. */
export function GridHead({ model, view, totals, picked, itemsOf }: GridHeadProps) {
  const { table } = model;
  const classOf = useCallback((index: number) => (table === undefined ? -1 : view.classIndex(table.classes[index] ?? "")), [table, view]);
  const firstWords = model.columns.findIndex((c) => c.role === "sample" || c.role === "class");
  return (
    <div role="row" aria-rowindex={1} className="grid-head">
      {model.columns.map((column, i) => {
        const { quantity } = column;
        const words = column.role !== "quantity" && column.role !== "uncertainty";
        return (
          <div
            key={column.name}
            role="columnheader"
            aria-colindex={i + 1}
            className={classNames(
              "min-w-0 pt-1 pb-1",
              words ? "text-left" : "pr-2 text-right",
              column.role === "sample" && "sticky left-0 z-[2] bg-paper pl-2",
            )}
          >
            <div className="truncate">
              <Name column={column} items={itemsOf?.(column)} />
            </div>
            <div className="truncate text-[12px] leading-4 text-second">
              {quantity !== undefined ? unitWords(quantity) : column.role === "uncertainty" ? "σ" : "\u00a0"}
            </div>
            <div className="h-7 py-1 pl-4">
              {quantity !== undefined && table !== undefined ? (
                <TickStrip values={quantity.value} hide={table.setAside} classOf={classOf} picked={picked} label={`${column.name}: one tick a sample`} />
              ) : null}
            </div>
            <div className={classNames("text-tick whitespace-nowrap text-second", words ? "" : "truncate")}>
              {quantity !== undefined && table !== undefined ? columnCounts(quantity, table.setAside) : i === firstWords ? "in use, not in use" : "\u00a0"}
            </div>
          </div>
        );
      })}
      {totals === null || table === undefined ? null : (
        <div role="columnheader" aria-colindex={model.columns.length + 1} className="min-w-0 pt-1 pr-2 pb-1 text-right">
          <div className="font-semibold">total</div>
          <div className="text-[12px] leading-4 text-second">wt%</div>
          <div className="h-7 py-1 pl-4">
            <TickStrip values={totals} hide={table.setAside} classOf={classOf} picked={picked} label="total: one tick a sample" />
          </div>
          <div className="text-tick text-second">{totals.reduce((n, v, i) => (Number.isFinite(v) && !table.setAside[i] ? n + 1 : n), 0)}</div>
        </div>
      )}
    </div>
  );
}
