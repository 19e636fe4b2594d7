"use client";

import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { KindSwatch } from "@/app/_ui/KindSwatch";
import { kindWords } from "../kindWords";
import { usePage } from "../pageContext";
import { clockTime, dayOf } from "../times";

/** What was deleted lies here and comes back whole. */
export function BinDialog({ onClose }: { readonly onClose: () => void }) {
  const bin = usePage((s) => s.bin);
  const edits = usePage((s) => s.edits);
  const people = usePage((s) => s.people);
  const latest = [...bin].sort((a, b) => (b.binned?.at ?? "").localeCompare(a.binned?.at ?? ""));
  return (
    <Dialog
      open
      onClose={onClose}
      title="The page's bin"
      says={bin.length === 0 ? "The bin is empty." : "A block comes back whole, where it stood: its text, amendments and reasons with it."}
    >
      <ul>
        {latest.map(({ key, block, binned }) => (
          <li key={key} className="flex items-center gap-3 border-b border-hairline py-2">
            <KindSwatch kind={block.kind} />
            <span className="font-medium">{block.name ?? kindWords[block.kind].title}</span>
            <span className="font-mono text-[12px] text-second">{block.id}</span>
            <span className="flex-1 text-margin text-second">
              {binned === undefined ? "" : [people[binned.by] ?? "", `${dayOf(binned.at)}, ${clockTime(new Date(binned.at))}`].filter(Boolean).join(", ")}
            </span>
            {edits === null ? null : (
              <Button onClick={() => edits.restoreBlock(key)} aria-label={`Bring ${block.name ?? block.id} back`}>
                Bring back
              </Button>
            )}
          </li>
        ))}
      </ul>
    </Dialog>
  );
}
