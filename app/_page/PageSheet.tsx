"use client";

import type { ReactNode } from "react";
import { BlockFrame } from "@/app/_blocks/BlockFrame";
import { packRows } from "./arrangement";
import { DraftNotice } from "./DraftNotice";
import { countPage, countsInWords } from "./counts";
import { MarginRow } from "./margin/MarginRow";
import { usePage } from "./pageContext";

export interface PageSheetProps {
  readonly title: ReactNode;
  /** Stands at the top of the margin, under the counts. */
  readonly beside?: ReactNode;
  /** What stands in place of blocks while there are none. */
  readonly empty: ReactNode;
  readonly foot: ReactNode;
}

function Counted() {
  const blocks = usePage((s) => s.blocks);
  const results = usePage((s) => s.results);
  return (
    <div className="margin-note">
      <b>Counted on this page</b>
      <br />
      {results === null ? "Calculating." : countsInWords(countPage(blocks, results))}
    </div>
  );
}

/** Title, rows of blocks with their margin, foot: the same for live pages, pages that are only read, and snapshots. */
export function PageSheet({ title, beside, empty, foot }: PageSheetProps) {
  const blocks = usePage((s) => s.blocks);
  const fault = usePage((s) => s.fault);
  const frozen = usePage((s) => s.mode === "frozen");
  const rows = packRows(blocks, (b) => b.block.width ?? 12);
  const picksBeside = (blocks.find((b) => b.block.kind === "plot") ?? blocks.find((b) => b.block.kind === "data"))?.key;
  return (
    <main className="page-sheet">
      <div className="page-row">
        <div className="page-columns">{title}</div>
        <aside className="margin self-end" aria-label="Counts">
          <Counted />
          {beside}
        </aside>
      </div>
      {fault === null ? null : (
        <p role="alert" className="mb-8 text-vermilion">
          {fault}
        </p>
      )}
      <DraftNotice />
      {rows.map((row) => (
        <div key={row[0]?.key} className="page-row">
          <div className="page-columns">
            {row.map(({ key }) => (
              <BlockFrame key={key} blockKey={key} />
            ))}
          </div>
          <MarginRow blocks={row} showsPicked={!frozen && row.some((b) => b.key === picksBeside)} />
        </div>
      ))}
      {blocks.length === 0 ? empty : null}
      {foot}
    </main>
  );
}
