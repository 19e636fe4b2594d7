"use client";

import { useState } from "react";
import type { PageView } from "@/app/_page/contract";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";

export interface StackDialogProps {
  readonly view: PageView;
  readonly handle: string;
  readonly chosen: readonly string[];
  readonly onDone: (handles: readonly string[] | null) => void;
}

/** Chooses the tables that are put under each other; their order here is their order in the table. */
export function StackDialog({ view, handle, chosen, onDone }: StackDialogProps) {
  const [picked, setPicked] = useState<readonly string[]>(chosen);
  const tables = view.blocks.flatMap(({ block }) => (block.kind === "data" && block.id !== handle ? [block] : []));
  const toggle = (id: string) => setPicked((old) => (old.includes(id) ? old.filter((o) => o !== id) : [...old, id]));
  return (
    <Dialog
      open
      onClose={() => onDone(null)}
      title="Stack tables"
      says="Rows are put under each other; columns meet by species and unit, and a column says where each row came from."
      actions={
        <>
          <Button look="quiet" onClick={() => onDone(null)}>
            Leave it
          </Button>
          <Button look="main" disabled={picked.length === 0} onClick={() => onDone(picked)}>
            Stack {picked.length === 0 ? "" : picked.join(", ")}
          </Button>
        </>
      }
    >
      <ul>
        {tables.map((block) => {
          const result = view.results?.blocks.get(block.id);
          return (
            <li key={block.id} className="border-b border-hairline">
              <label className="flex items-baseline gap-3 py-1.5">
                <input type="checkbox" className="accent-indigo" checked={picked.includes(block.id)} onChange={() => toggle(block.id)} />
                <span className="font-medium">{block.name ?? "Data"}</span>
                <span className="font-mono text-[12px] text-second">{block.id}</span>
                <span className="ml-auto text-second">{result?.kind === "data" && result.table !== undefined ? `${result.table.rows} rows` : ""}</span>
              </label>
            </li>
          );
        })}
      </ul>
    </Dialog>
  );
}
