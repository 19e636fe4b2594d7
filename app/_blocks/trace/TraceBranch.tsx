"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { classNames } from "@/app/_ui/classNames";
import type { TraceNode } from "@/cells";
import { branchWidth, cellInWords, nodeValue, shareText } from "./traceWords";

/** Branches shown before the rest is asked for: an aggregate over a hundred samples has as many. */
const first = 8;

export interface TraceBranchesProps {
  readonly nodes: readonly TraceNode[];
  readonly view: PageView;
  readonly depth: number;
}

/** What a number was made from, largest share first; each branch as wide as its share of the variance. */
export function TraceBranches({ nodes, view, depth }: TraceBranchesProps) {
  const [all, setAll] = useState(false);
  const shown = all ? nodes : nodes.slice(0, first);
  return (
    <ul className={depth === 0 ? "grid gap-2" : "grid gap-1"}>
      {shown.map((node, i) => (
        <Branch key={i} node={node} view={view} depth={depth} />
      ))}
      {nodes.length > shown.length && (
        <li>
          <Button className="text-margin" onClick={() => setAll(true)}>{`Show ${nodes.length - shown.length} more`}</Button>
        </li>
      )}
    </ul>
  );
}

function Branch({ node, view, depth }: { readonly node: TraceNode; readonly view: PageView; readonly depth: number }) {
  const isTop = depth === 0;
  const value = nodeValue(node, view.settings.uncertainty);
  const share = shareText(node.share);
  return (
    <li className={classNames("relative", isTop ? "pl-6" : "")}>
      {isTop && <span aria-hidden="true" className="absolute top-0 bottom-1 left-0 bg-indigo" style={{ width: branchWidth(node.share) }} />}
      <div className="relative py-1">
        {isTop && <span aria-hidden="true" className="absolute top-[11px] -left-6 w-4 border-t border-indigo" />}
        {node.cell !== undefined ? (
          <Cell node={node} view={view} />
        ) : node.kind === "conversion" && !isTop ? (
          <span className="block text-second">
            {node.label}
            {value !== "" && <span className="ml-2 font-mono text-ink">{value}</span>}
          </span>
        ) : (
          <span className="flex justify-between gap-2">
            <b className="min-w-0 font-mono font-medium break-words">
              {node.label}
              {value === "" ? "" : ` ${value}`}
            </b>
            {share !== "" && isTop && (
              <span className="shrink-0 font-mono font-medium text-indigo">
                {share}
                <span className="sr-only"> of the variance</span>
              </span>
            )}
          </span>
        )}
        {node.notes.map((note) => (
          <span key={note} className="block text-second">
            {note}
          </span>
        ))}
      </div>
      {node.from.length > 0 && <TraceBranches nodes={node.from} view={view} depth={depth + 1} />}
    </li>
  );
}

/** A source cell as the source has it, in a box that leads there; its σ's cell under it. */
function Cell({ node, view }: { readonly node: TraceNode; readonly view: PageView }) {
  const { cell } = node;
  if (cell === undefined) return null;
  const where = cellInWords(cell);
  const go = (column: string): void => {
    if (view.show !== undefined) view.show({ block: cell.block, row: cell.row, column });
    else document.getElementById(cell.block)?.scrollIntoView({ block: "start" });
  };
  const box = "inline-block border border-second px-1 font-mono text-[11.5px] leading-4 hover:border-indigo hover:text-indigo";
  const value = nodeValue(node, view.settings.uncertainty);
  return (
    <span className="block">
      {node.label !== "" && (
        <span className="block">
          <span className="font-mono font-medium">
            {node.label}
            {value === "" ? "" : ` ${value}`}
          </span>
        </span>
      )}
      <span className="mt-1 block">
        <button
          type="button"
          className={box}
          aria-label={`Go to ${where} of ${cell.block}: ${cell.raw === "" ? "empty" : cell.raw}`}
          onClick={() => go(cell.column)}
        >
          {cell.raw === "" ? "empty" : cell.raw}
        </button>{" "}
        <span className="text-second">{where}</span>
      </span>
      {cell.rawSigma !== "" && cell.rawSigma !== cell.raw && (
        <span className="mt-1 block">
          <button
            type="button"
            className={box}
            aria-label={`Go to the uncertainty of ${where} of ${cell.block}: ${cell.rawSigma}`}
            onClick={() => go(cell.sigmaHeader ?? cell.column)}
          >
            {cell.rawSigma}
          </button>{" "}
          <span className="text-second">uncertainty{cell.sigmaHeader === undefined ? "" : `, ${cell.sigmaHeader}`}</span>
        </span>
      )}
    </span>
  );
}
