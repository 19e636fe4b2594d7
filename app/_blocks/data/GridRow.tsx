"use client";

import { memo, type ReactNode } from "react";
import { ClassMarker } from "@/app/_ui/ClassMarker";
import { classNames } from "@/app/_ui/classNames";
import type { WrittenCell } from "./cellWords";

/** One cell, ready to be drawn. */
export interface DrawnCell {
  readonly name: string;
  readonly look: "sample" | "class" | "words" | "figure";
  readonly text: string;
  readonly written: WrittenCell | undefined;
  /** Footnote letters. */
  readonly letters: string;
  readonly flagged: boolean;
  readonly classIndex: number;
}

export interface GridRowProps {
  readonly id: string;
  readonly index: number;
  readonly top: number;
  readonly cells: readonly DrawnCell[];
  readonly picked: boolean;
  readonly aside: boolean;
  /** Place of the active cell in this row, below 0 for none. */
  readonly active: number;
  /** The field of a cell that is being typed in, at the active place. */
  readonly field: ReactNode;
  /** Others who picked this row. */
  readonly others: readonly { readonly name: string; readonly color: string }[];
}

function Figure({ cell }: { readonly cell: DrawnCell }) {
  const { written } = cell;
  if (written === undefined) return <span>{cell.text}</span>;
  const bracketed = written.aside;
  return (
    <>
      <span aria-hidden="true" className={classNames((written.absent || bracketed) && "text-second")}>
        {written.was === null ? null : <span className="grid-was">{written.was}</span>}
        {bracketed ? "[" : ""}
        <span className={classNames(written.was !== null && "grid-amended", cell.flagged && "text-vermilion")}>{written.value}</span>
        <span className="grid-sigma">
          {written.sigma}
          {written.mark}
          {bracketed ? "]" : ""}
          {cell.letters === "" ? null : <span className="grid-letter">{cell.letters}</span>}
        </span>
      </span>
      <span className="sr-only">
        {written.was === null ? "" : `was ${written.was}, now `}
        {bracketed ? "set aside: " : ""}
        {written.spoken}
        {cell.letters === "" ? "" : `, note ${cell.letters}`}
      </span>
    </>
  );
}

function Words({ cell }: { readonly cell: DrawnCell }) {
  return (
    <>
      {cell.look === "class" && cell.text !== "" ? <ClassMarker index={cell.classIndex} className="mr-2 align-[-1px]" /> : null}
      <span className="grid-name">{cell.text}</span>
      {cell.letters === "" ? null : <span className="grid-letter">{cell.letters}</span>}
    </>
  );
}

/** A row of a table; drawn again only when something in it changed. */
export const GridRow = memo(function GridRow({ id, index, top, cells, picked, aside, active, field, others }: GridRowProps) {
  return (
    <div
      role="row"
      aria-rowindex={index + 2}
      aria-selected={picked}
      data-row={index}
      className={classNames("grid-row", aside && "grid-row-aside")}
      style={{ top }}
    >
      {cells.map((cell, c) => (
        <div
          key={cell.name}
          id={`${id}-${index}-${c}`}
          role="gridcell"
          aria-colindex={c + 1}
          data-column={c}
          className={classNames(
            "grid-cell",
            cell.look === "sample" && "grid-cell-sample",
            (cell.look === "class" || cell.look === "words") && "grid-cell-words",
            c === active && "grid-cell-active",
          )}
        >
          {c === active && field !== null ? field : cell.look === "figure" ? <Figure cell={cell} /> : <Words cell={cell} />}
          {cell.look === "sample" && others.length > 0 ? (
            <span className="absolute top-1 right-0.5 flex gap-0.5">
              {others.map((person) => (
                <i key={person.name} title={`picked by ${person.name}`} className="inline-block h-4 w-[3px]" style={{ background: person.color }} />
              ))}
            </span>
          ) : null}
        </div>
      ))}
    </div>
  );
});
