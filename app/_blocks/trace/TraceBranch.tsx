"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { classNames } from "@/app/_ui/classNames";
import type { TraceNode } from "@/cells";
import { branchWidth, cellInWords, dividedBranches, nodeValue, restText, shareText, startsOpen } from "./traceWords";

export interface TraceBranchesProps {
  readonly nodes: readonly TraceNode[];
  readonly view: PageView;
  readonly depth: number;
  /** The way down to what dominates: open from the start. */
  readonly path: ReadonlySet<TraceNode>;
}

/** What a number was made from, largest share first; each branch as wide as its share of the variance, the small ones summed in a line. */
export function TraceBranches({ nodes, view, depth, path }: TraceBranchesProps) {
  const [all, setAll] = useState(false);
  const { shown, rest } = dividedBranches(nodes, depth, path);
  const list = classNames("grid", depth === 0 ? "gap-2" : "gap-1", depth > 1 && "border-l border-hairline pl-2");
  return (
    <ul className={list}>
      {shown.map((node, i) => (
        <Branch key={i} node={node} view={view} depth={depth} path={path} />
      ))}
      {rest.length > 0 && (
        <li className={depth === 0 ? "pl-6" : ""}>
          <Button className="text-margin" aria-expanded={all} onClick={() => setAll(!all)}>
            {all ? `Fold these ${rest.length}` : restText(rest)}
          </Button>
        </li>
      )}
      {all && rest.map((node, i) => <Branch key={`rest ${i}`} node={node} view={view} depth={depth} path={path} />)}
    </ul>
  );
}

interface BranchProps {
  readonly node: TraceNode;
  readonly view: PageView;
  readonly depth: number;
  readonly path: ReadonlySet<TraceNode>;
}

function Branch({ node, view, depth, path }: BranchProps) {
  const [open, setOpen] = useState(startsOpen(node, depth, path));
  const isTop = depth === 0;
  const value = nodeValue(node, view.settings.uncertainty);
  const share = shareText(node.share);
  const folds = node.from.length > 0 && node.kind === "result" && !isTop;
  return (
    <li className={classNames("relative min-w-0", isTop ? "pl-6" : "")}>
      {isTop && <span aria-hidden="true" className="absolute top-0 bottom-1 left-0 bg-indigo" style={{ width: branchWidth(node.share) }} />}
      <div className="relative py-1">
        {isTop && <span aria-hidden="true" className="absolute top-[11px] -left-6 w-4 border-t border-indigo" />}
        {node.cell !== undefined ? (
          <Cell node={node} view={view} />
        ) : (
          <span className="flex justify-between gap-2">
            <Name node={node} value={value} isTop={isTop} {...(folds ? { open, onFold: () => setOpen(!open) } : {})} />
            <Share text={share} isTop={isTop} />
          </span>
        )}
        {(!folds || open) &&
          node.notes.map((note) => (
            <span key={note} className="block text-second">
              {note}
            </span>
          ))}
      </div>
      {node.from.length > 0 && (!folds || open) && <TraceBranches nodes={node.from} view={view} depth={depth + 1} path={path} />}
    </li>
  );
}

interface NameProps {
  readonly node: TraceNode;
  readonly value: string;
  readonly isTop: boolean;
  readonly open?: boolean;
  onFold?(): void;
}

function Name({ node, value, isTop, open, onFold }: NameProps) {
  const text = `${node.label}${value === "" ? "" : ` ${value}`}`;
  if (onFold !== undefined)
    return (
      <button type="button" aria-expanded={open} className="min-w-0 text-left font-mono break-words hover:text-indigo" onClick={onFold}>
        <span aria-hidden="true" className="mr-1 inline-block w-3 text-second">
          {open === true ? "−" : "+"}
        </span>
        {text}
      </button>
    );
  if (node.kind === "conversion" && !isTop)
    return (
      <span className="min-w-0 break-words text-second">
        {node.label}
        {value !== "" && <span className="ml-2 font-mono text-ink">{value}</span>}
      </span>
    );
  return <b className="min-w-0 font-mono font-medium break-words">{text}</b>;
}

function Share({ text, isTop }: { readonly text: string; readonly isTop: boolean }) {
  if (text === "") return null;
  return (
    <span className={classNames("shrink-0 font-mono", isTop ? "font-medium text-indigo" : "text-second")}>
      {text}
      <span className="sr-only"> of the variance</span>
    </span>
  );
}

/** Leads to a cell of a source table: the table comes on the screen, unfolded, with the cell active. */
export function showCell(view: PageView, cell: NonNullable<TraceNode["cell"]>, column = cell.column): void {
  if (view.show !== undefined) view.show({ block: cell.block, row: cell.row, column });
  else document.getElementById(cell.block)?.scrollIntoView({ block: "start" });
}

/** A source cell as the source has it, in a box that leads there; its σ's cell under it. */
function Cell({ node, view }: { readonly node: TraceNode; readonly view: PageView }) {
  const { cell } = node;
  if (cell === undefined) return null;
  const where = cellInWords(cell);
  const go = (column: string): void => showCell(view, cell, column);
  const box = "inline-block border border-second px-1 font-mono text-[11.5px] leading-4 hover:border-indigo hover:text-indigo";
  const value = nodeValue(node, view.settings.uncertainty);
  return (
    <span className="block">
      {node.label !== "" && (
        <span className="flex justify-between gap-2">
          <span className="min-w-0 font-mono font-medium break-words">
            {node.label}
            {value === "" ? "" : ` ${value}`}
          </span>
          <Share text={shareText(node.share)} isTop={false} />
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
