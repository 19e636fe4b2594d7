"use client";

import { useMemo, useState } from "react";
import type { Preview } from "@/app/_page/engineProtocol";
import { unpackTable } from "@/app/_page/tablePacking";
import { Button } from "@/app/_ui/Button";
import { Chemical } from "@/app/_ui/Chemical";
import { counted } from "@/app/_ui/concise";
import type { Problem } from "@/cells";
import { unitWords, writeCell } from "./cellWords";

export interface PreviewTableProps {
  readonly preview: Preview | null;
  /** What the importer itself noticed in the file. */
  readonly problems: readonly Problem[];
  readonly rows: number;
}

const FEW = 6;

function placeOf(problem: Problem): string {
  const parts = [problem.row === undefined ? "" : `row ${problem.row}`, problem.column ?? ""].filter(Boolean);
  return parts.length === 0 ? "" : `${parts.join(", ")}: `;
}

function Problems({ problems }: { readonly problems: readonly Problem[] }) {
  const [all, setAll] = useState(false);
  if (problems.length === 0) return <p className="mt-2 text-second">Every cell could be read.</p>;
  const shown = all ? problems : problems.slice(0, FEW);
  return (
    <ul className="mt-2">
      {shown.map((problem, i) => (
        <li key={i} className={problem.severity === "error" ? "text-vermilion" : "text-second"}>
          <span className="font-mono text-[12px]">{placeOf(problem)}</span>
          {problem.text}
        </li>
      ))}
      {problems.length > shown.length ? (
        <li>
          <Button onClick={() => setAll(true)}>and {problems.length - shown.length} more</Button>
        </li>
      ) : null}
    </ul>
  );
}

/** The first rows as they are read, and what could not be. */
export function PreviewTable({ preview, problems, rows }: PreviewTableProps) {
  const table = useMemo(() => (preview?.table == null ? null : unpackTable(preview.table)), [preview]);
  const seen = new Set(problems.map((p) => `${p.row ?? ""} ${p.column ?? ""} ${p.text}`));
  const all = [...problems, ...(preview?.problems ?? []).filter((p) => !seen.has(`${p.row ?? ""} ${p.column ?? ""} ${p.text}`))];
  return (
    <section className="mt-6" aria-label="As it is read">
      <h3 className="text-block font-semibold">As it is read</h3>
      <Problems problems={all} />
      {preview === null ? <p className="mt-2 text-second">Reading the rows.</p> : null}
      {table === null ? null : (
        <>
          <div className="mt-3 max-h-80 overflow-auto" tabIndex={0} role="region" aria-label="First rows">
            <table className="border-collapse">
              <thead className="sticky top-0 bg-paper">
                <tr className="text-right">
                  <th className="pr-3 pb-1 text-left text-tick font-normal text-second">row</th>
                  {table.columns.map((column) => (
                    <th key={column.name} className={`min-w-20 px-2 pb-1 font-normal ${column.kind === "text" ? "text-left" : ""}`}>
                      <div className="font-semibold">{column.kind === "quantity" ? <Chemical name={column.name} /> : column.name}</div>
                      <div className="text-tick text-second">{column.kind === "quantity" ? unitWords(column) : column.role}</div>
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody className="border-t border-ink">
                {Array.from({ length: table.rows }, (_, r) => (
                  <tr key={r} className="h-6 border-b border-hairline font-mono text-[12.5px]">
                    <td className="pr-3 text-tick text-second">{table.rowIds[r]}</td>
                    {table.columns.map((column) => {
                      if (column.kind === "text")
                        return (
                          <td key={column.name} className="max-w-52 truncate px-2 font-sans">
                            {column.text[r]}
                          </td>
                        );
                      const cell = writeCell(column, r, "concise", undefined, false);
                      return (
                        <td key={column.name} className={`px-2 text-right whitespace-nowrap ${cell.absent ? "text-second" : ""}`}>
                          {cell.value}
                          <span className="text-second">{cell.sigma}</span>
                        </td>
                      );
                    })}
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
          {rows > table.rows ? (
            <p className="mt-1 text-margin text-second">
              The first {table.rows} of {counted(rows, "row")}; all of them are saved.
            </p>
          ) : null}
        </>
      )}
    </section>
  );
}
