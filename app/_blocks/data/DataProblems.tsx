"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import type { DataBlock, DataResult, Problem } from "@/cells";

const FEW = 5;

/** What is wrong with a table, each with its row and column, and a way there. */
export function DataProblems({ result, block, view }: { readonly result: DataResult | undefined; readonly block: DataBlock; readonly view: PageView }) {
  const [all, setAll] = useState(false);
  const problems = result?.problems ?? [];
  if (problems.length === 0) return null;
  const ordered = [...problems].sort((a, b) => rank(a) - rank(b));
  const shown = all ? ordered : ordered.slice(0, FEW);
  return (
    <ul className="mt-2" aria-label={`Problems of ${block.name ?? block.id}`}>
      {shown.map((problem, i) => {
        const { row, column } = problem;
        const place = [row === undefined ? "" : `row ${row}`, column ?? ""].filter(Boolean).join(", ");
        return (
          <li key={i} className={problem.severity === "error" ? "text-vermilion" : "text-margin text-second"}>
            {place === "" ? null : row === undefined ? (
              <span className="font-mono text-[12px]">{place}: </span>
            ) : (
              <>
                <button
                  type="button"
                  className="font-mono text-[12px] underline decoration-dotted underline-offset-2"
                  onClick={() => view.show?.({ block: block.id, row, ...(column === undefined ? {} : { column }) })}
                >
                  {place}
                </button>
                {": "}
              </>
            )}
            {problem.text}
          </li>
        );
      })}
      {ordered.length > shown.length ? (
        <li>
          <Button onClick={() => setAll(true)}>and {ordered.length - shown.length} more</Button>
        </li>
      ) : null}
    </ul>
  );
}

function rank(problem: Problem): number {
  return problem.severity === "error" ? 0 : problem.severity === "warning" ? 1 : 2;
}
