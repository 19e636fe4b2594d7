"use client";

import { useMemo, useState } from "react";
import { TraceView } from "@/app/_blocks/trace/TraceView";
import { Button } from "@/app/_ui/Button";
import type { Block, DataBlock } from "@/cells";
import { useWholeView, usePage } from "../pageContext";
import { footnotesOf, type Footnote } from "./footnotes";
import { remarksOn } from "./remarksOn";
import { signedReason } from "./signedReason";

/** How many notes of one block stand open; the others wait behind a line. */
const OPEN_NOTES = 8;

const kindTitles: Record<Footnote["kind"], string> = { amended: "Amended", "set aside": "Set aside", "value set aside": "Set aside", screening: "Screening" };

function DataNotes({ block, blockKey, named }: { readonly block: DataBlock; readonly blockKey: string; readonly named: boolean }) {
  const result = usePage((s) => s.results?.blocks.get(block.id));
  const people = usePage((s) => s.people);
  const view = useWholeView();
  const [all, setAll] = useState(false);
  const notes = useMemo(() => footnotesOf(block, result?.kind === "data" ? result : undefined), [block, result]);
  if (notes.length === 0) return null;
  const shown = all ? notes : notes.slice(0, OPEN_NOTES);
  return (
    <div className="margin-list">
      {shown.map((note, i) => (
        <div key={`${note.letter} ${note.row}`} className="margin-note">
          <span className="margin-letter">{note.letter}</span>
          {named && i === 0 ? <div className="text-tick">{block.name ?? block.id}</div> : null}
          <button
            type="button"
            className="block text-left hover:text-ink"
            onClick={() => view.show?.({ block: block.id, row: note.row, ...(note.column === undefined ? {} : { column: note.column }) })}
          >
            <b>{kindTitles[note.kind]}</b>{" "}
            {note.kind === "amended" ? `${note.sample === "" ? `row ${note.row}` : note.sample}, ${note.column ?? ""}, ${note.title}` : note.title}
          </button>
          {signedReason(note, people)}
        </div>
      ))}
      {notes.length > shown.length ? (
        <div className="margin-note">
          <Button onClick={() => setAll(true)} aria-label={`Show all ${notes.length} notes on ${block.name ?? blockKey}`}>
            and {notes.length - shown.length} more
          </Button>
        </div>
      ) : null}
    </div>
  );
}

function OtherNotes({ block }: { readonly block: Block }) {
  const result = usePage((s) => s.results?.blocks.get(block.id));
  return remarksOn(result).map((remark) => (
    <div key={remark.title} className="margin-note">
      <b>{remark.title}</b>
      <br />
      {remark.text}
    </div>
  ));
}

/** What people picked, beside the block where the eye is most likely to be: the first plot, else the first table. */
function Picked() {
  const picked = usePage((s) => s.picked);
  const results = usePage((s) => s.results);
  const view = useWholeView();
  if (picked.length === 0) return null;
  const names = picked.slice(0, 3).map(({ table, row }) => {
    const result = results?.blocks.get(table);
    const at = result?.kind === "data" ? (result.table?.rowIds.indexOf(row) ?? -1) : -1;
    const sample = result?.kind === "data" && at >= 0 ? result.table?.samples[at] : undefined;
    return sample === undefined || sample === "" ? `row ${row}` : sample;
  });
  const more = picked.length - names.length;
  return (
    <div className="margin-note">
      <b>Picked</b> {names.join(", ")}
      {more > 0 ? ` and ${more} more` : ""}
      <br />
      Marked in every block of the page, for everyone here. <Button onClick={() => view.pick([])}>Let go</Button>
    </div>
  );
}

export interface MarginRowProps {
  readonly blocks: readonly { readonly key: string; readonly block: Block }[];
  readonly showsPicked: boolean;
}

/** The margin beside one row of blocks: what people and the program say about them. */
export function MarginRow({ blocks, showsPicked }: MarginRowProps) {
  const traced = usePage((s) => s.traced?.request.block ?? null);
  const view = useWholeView();
  const tables = blocks.filter((b) => b.block.kind === "data").length;
  return (
    <aside className="margin" aria-label={`Notes on ${blocks.map((b) => b.block.name ?? b.block.id).join(", ")}`}>
      {traced !== null && blocks.some((b) => b.block.id === traced) ? <TraceView view={view} /> : null}
      {blocks.map(({ key, block }) =>
        block.kind === "data" ? <DataNotes key={key} blockKey={key} block={block} named={tables > 1} /> : <OtherNotes key={key} block={block} />,
      )}
      {showsPicked ? <Picked /> : null}
    </aside>
  );
}
