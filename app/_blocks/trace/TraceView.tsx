"use client";

import { useEffect, useRef } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { rowLabel } from "@/app/_blocks/shared/picks";
import { quantilesInWords, wishInWords } from "@/app/_blocks/shared/simulatedWords";
import { tableOf } from "@/app/_blocks/shared/tableOf";
import { dominantOf, type PlotBlock, type TraceNode } from "@/cells";
import { showCell, TraceBranches } from "./TraceBranch";
import { askedInWords, askedTitle, cellOwner, hasShares, mostOfSigma, nodeValue } from "./traceWords";

/** Which sample of which table a trace asks about, by its name; "" for single values. */
function sampleOf(view: PageView): string {
  const request = view.traced?.request;
  if (request?.index === undefined) return "";
  const block = view.blocks.find((b) => b.block.id === request.block)?.block;
  const data =
    block?.kind === "data"
      ? block.id
      : block?.kind === "plot"
        ? drawnTable(block, request.name)
        : block !== undefined && "data" in block
          ? block.data
          : undefined;
  return rowLabel(tableOf(view.results, data), request.index);
}

/** The table that a point of a plot is a row of: its name begins with its place in the plot's list. */
function drawnTable(block: PlotBlock, name: string): string | undefined {
  const drawn = block.drawn[Number(name.slice(0, name.indexOf(":")))];
  return drawn !== undefined && "data" in drawn ? drawn.data : undefined;
}

const noPath: ReadonlySet<TraceNode> = new Set();

/** What dominates the σ, in a sentence, with the way to its cell. */
function Most({ node, view }: { readonly node: TraceNode; readonly view: PageView }) {
  return mostOfSigma(node).map(({ text, cell }) => (
    <p key={text} className="mt-1">
      {text}{" "}
      {cell !== undefined && (
        <Button className="text-margin" aria-label={`Go to the cell ${cell.column} of ${cellOwner(cell)}`} onClick={() => showCell(view, cell)}>
          Go to the cell
        </Button>
      )}
    </p>
  ));
}

/** The trace of the asked number, in the margin: where it comes from, down to the source cells. Escape closes it. */
export function TraceView({ view }: { readonly view: PageView }) {
  const frame = useRef<HTMLElement>(null);
  const came = useRef<Element | null>(null);
  const { traced } = view;
  const key = traced === null ? null : `${traced.request.block} ${traced.request.name} ${traced.request.index ?? ""}`;

  // Whoever asked by keyboard goes on in the answer, and on closing returns to the number.
  useEffect(() => {
    if (key === null) return;
    came.current = document.activeElement;
    frame.current?.focus({ preventScroll: true });
  }, [key]);
  if (traced === null) return null;
  const { node, request } = traced;
  const close = (): void => {
    view.trace(null);
    if (came.current instanceof HTMLElement && came.current.isConnected) came.current.focus({ preventScroll: true });
  };
  const sample = sampleOf(view);
  const title = askedTitle(request, node);
  return (
    <section
      ref={frame}
      tabIndex={-1}
      aria-label={`Trace of ${title}${sample === "" ? "" : `, ${sample}`}`}
      aria-busy={node === null}
      className="break-inside-avoid border-t border-l border-indigo pt-2 pl-[19px] text-margin text-ink outline-none"
      onKeyDown={(event) => {
        if (event.key !== "Escape") return;
        event.stopPropagation();
        close();
      }}
    >
      <p className="flex justify-between gap-2 text-second">
        <span className="min-w-0">
          Trace of <b className="font-semibold text-ink">{title}</b>
          {sample === "" ? "" : `, ${sample}`}
        </span>
        <Button className="text-margin" onClick={close}>
          Close
        </Button>
      </p>
      {node === null ? (
        <p className="mt-2 pb-2 text-second" role="status">
          Looking up where it comes from.
        </p>
      ) : (
        <>
          <p className="mt-2 font-mono text-trace font-medium">
            {nodeValue(node, view.settings.uncertainty) || "–"}
            <small className="ml-2 font-sans text-margin font-normal text-second">{askedInWords(node)}</small>
          </p>
          {node.simulated !== undefined && (
            <p className="text-second">
              {quantilesInWords(node.simulated, node.unit)} ({wishInWords(node.simulated)})
            </p>
          )}
          <Most node={node} view={view} />
          <div className="mt-2">
            <p className="pb-1 font-mono break-words">{node.label}</p>
            {hasShares(node) && <p className="pb-1 text-second">the branch’s width is its share of the variance</p>}
            {node.from.length > 0 ? (
              <TraceBranches key={key} nodes={node.from} view={view} depth={0} path={dominantOf(node)?.path ?? noPath} />
            ) : (
              <p className="text-second">Nothing further stands behind this number.</p>
            )}
            {node.notes.length > 0 && (
              <div className="mt-2 grid gap-1 border-t border-hairline pt-3 text-second">
                {node.notes.map((note) => (
                  <p key={note}>{note}</p>
                ))}
              </div>
            )}
          </div>
        </>
      )}
    </section>
  );
}
